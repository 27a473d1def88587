import { queryOptions, useQueryClient } from '@tanstack/react-query';
import type {
  EnrolmentDto,
  ProtocolDifferenceDto,
  ProtocolDraftDto,
  ProtocolVerdictDto,
  ProtocolVersionDto,
  ProtocolVersionSummaryDto,
} from '#schemas/api/protocol.ts';
import { api } from '#frontend/lib/api.ts';

const keys = {
  all: (study: string) => ['protocol', study] as const,
  versions: (study: string) => [...keys.all(study), 'versions'] as const,
  version: (study: string, id: string) => [...keys.all(study), 'version', id] as const,
  differences: (study: string, id: string, other: string) =>
    [...keys.all(study), 'differences', id, other] as const,
  draft: (study: string) => [...keys.all(study), 'draft'] as const,
  verdict: (study: string, text: string) => ['protocol-verdict', study, text] as const,
  enrolment: (study: string) => [...keys.all(study), 'enrolment'] as const,
};

const read = async <T>(path: string, signal: AbortSignal): Promise<T> =>
  (await api<T>(path, { signal })).data;

export const protocolVersionsQuery = (study: string) =>
  queryOptions({
    queryKey: keys.versions(study),
    queryFn: ({ signal }) => read<ProtocolVersionSummaryDto[]>(`/studies/${study}/protocol-versions`, signal),
  });

export const protocolVersionQuery = (study: string, id: string) =>
  queryOptions({
    queryKey: keys.version(study, id),
    queryFn: ({ signal }) => read<ProtocolVersionDto>(`/studies/${study}/protocol-versions/${id}`, signal),
  });

export const protocolDifferencesQuery = (study: string, id: string, other: string) =>
  queryOptions({
    queryKey: keys.differences(study, id, other),
    queryFn: ({ signal }) =>
      read<ProtocolDifferenceDto[]>(`/studies/${study}/protocol-versions/${id}/differences/${other}`, signal),
    staleTime: Infinity,
  });

/** The draft; `null` while nobody has begun one. */
export const protocolDraftQuery = (study: string) =>
  queryOptions({
    queryKey: keys.draft(study),
    queryFn: ({ signal }) => read<ProtocolDraftDto | null>(`/studies/${study}/protocol-draft`, signal),
  });

export const protocolVerdictQuery = (study: string, text: string) =>
  queryOptions({
    queryKey: keys.verdict(study, text),
    queryFn: async ({ signal }) =>
      (
        await api<ProtocolVerdictDto>(`/studies/${study}/protocol-draft/check`, {
          method: 'POST',
          body: { text },
          signal,
        })
      ).data,
    staleTime: Infinity,
    gcTime: 60_000,
  });

export const enrolmentQuery = (study: string) =>
  queryOptions({
    queryKey: keys.enrolment(study),
    queryFn: ({ signal }) => read<EnrolmentDto>(`/studies/${study}/enrolment`, signal),
  });

/** What the investigator does about the protocol; each act brings its pages up to date. */
export function useProtocolActs(study: string) {
  const client = useQueryClient();
  const path = `/studies/${study}/protocol-draft`;
  const keep = (draft: ProtocolDraftDto): ProtocolDraftDto => {
    client.setQueryData(keys.draft(study), draft);
    return draft;
  };
  const refresh = () => client.invalidateQueries({ queryKey: keys.all(study) });
  return {
    begin: async (from: 'blank' | 'newest') =>
      keep((await api<ProtocolDraftDto>(path, { method: 'POST', body: { from } })).data),
    save: async (text: string, ifMatch: number) =>
      keep((await api<ProtocolDraftDto>(path, { method: 'PUT', body: { text }, ifMatch })).data),
    discard: async (reason: string, ifMatch: number) =>
      keep(
        (await api<ProtocolDraftDto>(`${path}/discarding`, { method: 'POST', body: { reason }, ifMatch }))
          .data,
      ),
    publish: async (reason: string, ifMatch: number) => {
      const address = `${path}/publication`;
      const { data } = await api<ProtocolVersionDto>(address, { method: 'POST', body: { reason }, ifMatch });
      await refresh();
      return data;
    },
    openEnrolment: async (reason: string, ifMatch: number) => {
      await api<EnrolmentDto>(`/studies/${study}/enrolment`, { method: 'POST', body: { reason }, ifMatch });
      await Promise.all([
        refresh(),
        client.invalidateQueries({ queryKey: ['studies'] }),
        client.invalidateQueries({ queryKey: ['session'] }),
      ]);
    },
  };
}
