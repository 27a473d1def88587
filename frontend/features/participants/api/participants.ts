import { infiniteQueryOptions, queryOptions, useQueryClient } from '@tanstack/react-query';
import type { PlanVisitBody, VisitDto } from '#schemas/api/capture.ts';
import type {
  ConfirmEligibilityBody,
  EmergencyOpeningDto,
  EnrolParticipantBody,
  IdentifiersBody,
  IdentifiersDto,
  IdentifiersReadingDto,
  ParticipantDto,
  WithdrawParticipantBody,
} from '#schemas/api/participants.ts';
import { api, queryString } from '#frontend/lib/api.ts';

export interface ParticipantFilters {
  site: string;
  state: string;
  code: string;
}

interface Page<Item> {
  items: Item[];
  nextCursor: string | null;
}

const keys = {
  all: (studyCode: string) => ['participants', studyCode] as const,
  list: (studyCode: string, filters: ParticipantFilters) =>
    [...keys.all(studyCode), 'list', filters] as const,
  one: (studyCode: string, code: string) => [...keys.all(studyCode), 'one', code] as const,
  readings: (studyCode: string, id: string) => [...keys.all(studyCode), 'readings', id] as const,
  /** Below the key of all visits, so that what is done to one of them shows here too. */
  visits: (studyCode: string, id: string) => ['visits', studyCode, { participant: id }] as const,
};

const pathOf = (studyCode: string, id = '') =>
  `/studies/${studyCode}/participants${id === '' ? '' : `/${id}`}`;

export const participantsQuery = (studyCode: string, filters: ParticipantFilters) =>
  infiniteQueryOptions({
    queryKey: keys.list(studyCode, filters),
    queryFn: async ({ pageParam, signal }) =>
      (
        await api<Page<ParticipantDto>>(
          pathOf(studyCode) + queryString({ ...filters, cursor: pageParam, limit: 100 }),
          { signal },
        )
      ).data,
    initialPageParam: '',
    getNextPageParam: ({ nextCursor }) => nextCursor ?? undefined,
  });

export const participantQuery = (studyCode: string, code: string) =>
  queryOptions({
    queryKey: keys.one(studyCode, code),
    queryFn: async ({ signal }) =>
      (await api<ParticipantDto>(`${pathOf(studyCode)}/by-code/${encodeURIComponent(code)}`, { signal }))
        .data,
  });

export const readingsQuery = (studyCode: string, id: string) =>
  queryOptions({
    queryKey: keys.readings(studyCode, id),
    queryFn: async ({ signal }) =>
      (await api<Page<IdentifiersReadingDto>>(`${pathOf(studyCode, id)}/identifiers/readings`, { signal }))
        .data,
  });

export const visitsQuery = (studyCode: string, id: string) =>
  queryOptions({
    queryKey: keys.visits(studyCode, id),
    queryFn: async ({ signal }) =>
      (await api<Page<VisitDto>>(`${pathOf(studyCode, id)}/visits`, { signal })).data.items,
  });

/** Enrols a person. The same key for the same body, so that a lost answer does not enrol twice. */
export async function enrolParticipant(
  studyCode: string,
  body: EnrolParticipantBody,
  idempotencyKey: string,
): Promise<ParticipantDto> {
  return (await api<ParticipantDto>(pathOf(studyCode), { method: 'POST', body, idempotencyKey })).data;
}

/** What can be done to one participant; each keeps the page's copy in step. */
export function useParticipantActs(studyCode: string, { id, code, revision }: ParticipantDto) {
  const client = useQueryClient();
  const path = pathOf(studyCode, id);

  async function change(method: 'POST' | 'PUT', act: string, body: object): Promise<void> {
    try {
      const { data } = await api<ParticipantDto>(`${path}/${act}`, { method, body, ifMatch: revision });
      client.setQueryData(keys.one(studyCode, code), data);
    } finally {
      // Refused too: someone else may have changed it, and the page then shows the present state.
      void refresh();
    }
  }
  const refresh = () => client.invalidateQueries({ queryKey: keys.all(studyCode) });

  return {
    confirmEligibility: (body: ConfirmEligibilityBody) => change('PUT', 'eligibility', body),
    assignPlace: () => change('POST', 'allocation', {}),
    withdraw: (body: WithdrawParticipantBody) => change('POST', 'withdrawal', body),
    openInEmergency: async (body: { reason: string; password: string }): Promise<EmergencyOpeningDto> => {
      const { data } = await api<EmergencyOpeningDto>(`${path}/emergency-opening`, { method: 'POST', body });
      void refresh();
      return data;
    },
    /** Not through the query cache: identifiers live in the panel that shows them and nowhere else (WS-13). */
    readIdentifiers: async (reason?: string): Promise<IdentifiersDto> => {
      const body = reason === undefined ? {} : { reason };
      const { data } = await api<IdentifiersDto>(`${path}/identifiers/reading`, { method: 'POST', body });
      void client.invalidateQueries({ queryKey: keys.readings(studyCode, id) });
      return data;
    },
    planVisit: async (body: PlanVisitBody): Promise<void> => {
      await api<VisitDto>(`${path}/visits`, { method: 'POST', body });
      void client.invalidateQueries({ queryKey: ['visits', studyCode] });
      void refresh();
    },
    writeIdentifiers: (identifiers: IdentifiersBody, reason: string, seen: number) =>
      api<undefined>(`${path}/identifiers`, { method: 'PUT', body: { identifiers, reason }, ifMatch: seen }),
  };
}
