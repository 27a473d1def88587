import { infiniteQueryOptions, queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import type {
  LiveQuantityDto,
  NoteDeviationBody,
  RunSheetDto,
  StampStepBody,
  VisitDto,
} from '#schemas/api/capture.ts';
import type { VisitType } from '#schemas/protocol/protocol.ts';
import { api, queryString } from '../../../lib/api.ts';

/** A run sheet with its visit type in its own type. */
export type RunSheet = Omit<RunSheetDto, 'visitType'> & { visitType: VisitType };

export interface VisitFilter {
  from?: string | undefined;
  to?: string | undefined;
  state?: string | undefined;
}

const keys = {
  all: (study: string) => ['visits', study] as const,
  one: (study: string, id: string) => ['visit', study, id] as const,
  live: (study: string, id: string) => ['visit', study, id, 'quantities'] as const,
};

export const visitsQuery = (study: string, filter: VisitFilter) =>
  queryOptions({
    queryKey: [...keys.all(study), filter],
    queryFn: async ({ signal }) =>
      (
        await api<{ items: VisitDto[]; nextCursor: string | null }>(
          `/studies/${study}/visits${queryString({ ...filter, limit: 200 })}`,
          { signal },
        )
      ).data.items,
  });

/** Every visit of the study, two hundred at a time. */
export const everyVisitQuery = (study: string) =>
  infiniteQueryOptions({
    queryKey: [...keys.all(study), 'every'],
    queryFn: async ({ pageParam, signal }) =>
      (
        await api<{ items: VisitDto[]; nextCursor: string | null }>(
          `/studies/${study}/visits${queryString({ cursor: pageParam, limit: 200 })}`,
          { signal },
        )
      ).data,
    initialPageParam: '',
    getNextPageParam: ({ nextCursor }) => nextCursor ?? undefined,
  });

export const runSheetQuery = (study: string, id: string) =>
  queryOptions({
    queryKey: keys.one(study, id),
    queryFn: async ({ signal }) => (await api<RunSheet>(`/studies/${study}/visits/${id}`, { signal })).data,
    refetchInterval: 30_000,
  });

export const liveQuery = (study: string, id: string) =>
  queryOptions({
    queryKey: keys.live(study, id),
    queryFn: async ({ signal }) =>
      (await api<LiveQuantityDto[]>(`/studies/${study}/visits/${id}/quantities`, { signal })).data,
  });

/** A change of the visit itself, guarded by the revision that was seen. */
export function useVisitAct(study: string, visit: Pick<VisitDto, 'id' | 'revision'>) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: ({
      path,
      body,
    }: {
      path: 'beginning' | 'completion' | 'rescheduling' | 'missing';
      body: unknown;
    }) =>
      api<VisitDto>(`/studies/${study}/visits/${visit.id}/${path}`, {
        method: 'POST',
        ifMatch: visit.revision,
        body,
      }),
    onSettled: () =>
      Promise.all([
        client.invalidateQueries({ queryKey: keys.all(study) }),
        client.invalidateQueries({ queryKey: keys.one(study, visit.id) }),
      ]),
  });
}

/** Stamps a step; the answer is the run sheet as it is then. */
export function useStampStep(study: string, visitId: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: StampStepBody) =>
      api<RunSheet>(`/studies/${study}/visits/${visitId}/step-events`, { method: 'POST', body }),
    onSuccess: ({ data }) => client.setQueryData(keys.one(study, visitId), data),
  });
}

export function useNoteDeviation(study: string, visitId: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: NoteDeviationBody) =>
      api<RunSheet>(`/studies/${study}/visits/${visitId}/deviations`, { method: 'POST', body }),
    onSuccess: ({ data }) => client.setQueryData(keys.one(study, visitId), data),
  });
}
