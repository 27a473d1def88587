import { keepPreviousData, queryOptions, useQueryClient } from '@tanstack/react-query';
import type {
  DifferenceDto,
  DraftContentBody,
  DraftDto,
  InstrumentDto,
  LibraryInstrumentDto,
  StartDraftBody,
  VerdictDto,
  VersionDto,
  VersionSummaryDto,
} from '#schemas/api/instruments.ts';
import { api } from '#frontend/lib/api.ts';

const keys = {
  all: (study: string) => ['instruments', study] as const,
  list: (study: string) => [...keys.all(study), 'list'] as const,
  library: (study: string) => [...keys.all(study), 'library'] as const,
  versions: (study: string, key: string) => [...keys.all(study), 'versions', key] as const,
  draft: (study: string, id: string) => [...keys.all(study), 'draft', id] as const,
  differences: (study: string, id: string, other: string) =>
    [...keys.all(study), 'differences', id, other] as const,
  verdict: (study: string, id: string, content: DraftContentBody) =>
    ['instrument-verdict', study, id, content] as const,
};

const read = async <T>(path: string, signal: AbortSignal): Promise<T> =>
  (await api<T>(path, { signal })).data;

export const instrumentsQuery = (study: string) =>
  queryOptions({
    queryKey: keys.list(study),
    queryFn: ({ signal }) => read<InstrumentDto[]>(`/studies/${study}/instruments`, signal),
  });

export const libraryQuery = (study: string) =>
  queryOptions({
    queryKey: keys.library(study),
    queryFn: ({ signal }) => read<LibraryInstrumentDto[]>(`/studies/${study}/instrument-library`, signal),
    staleTime: Infinity,
  });

export const versionsQuery = (study: string, key: string) =>
  queryOptions({
    queryKey: keys.versions(study, key),
    queryFn: ({ signal }) =>
      read<VersionSummaryDto[]>(`/studies/${study}/instruments/${key}/versions`, signal),
  });

/** A published version; it never changes, only whether a newer one exists. */
export const versionQuery = (study: string, id: string) =>
  queryOptions({
    queryKey: [...keys.all(study), 'version', id] as const,
    queryFn: ({ signal }) => read<VersionDto>(`/studies/${study}/instrument-versions/${id}`, signal),
  });

export const differencesQuery = (study: string, id: string, other: string) =>
  queryOptions({
    queryKey: keys.differences(study, id, other),
    queryFn: ({ signal }) =>
      read<DifferenceDto[]>(`/studies/${study}/instrument-versions/${id}/differences/${other}`, signal),
    staleTime: Infinity,
  });

export const draftQuery = (study: string, id: string) =>
  queryOptions({
    queryKey: keys.draft(study, id),
    queryFn: ({ signal }) => read<DraftDto>(`/studies/${study}/instrument-drafts/${id}`, signal),
  });

/** What the server says of a text and samples; asked after a pause in typing, kept for the same text. */
export const verdictQuery = (study: string, id: string, content: DraftContentBody) =>
  queryOptions({
    queryKey: keys.verdict(study, id, content),
    queryFn: async ({ signal }) =>
      (
        await api<VerdictDto>(`/studies/${study}/instrument-drafts/${id}/check`, {
          method: 'POST',
          body: content,
          signal,
        })
      ).data,
    staleTime: Infinity,
    gcTime: 60_000,
    placeholderData: keepPreviousData,
  });

/** Where the compiled validator of a schema is. */
export const validatorUrl = (study: string, hash: string): string =>
  `/api/v1/studies/${study}/instruments/validators/${hash}.js`;

/** What the investigator does at the drafting table; each act brings the lists up to date. */
export function useDraftActs(study: string) {
  const client = useQueryClient();
  const path = `/studies/${study}/instrument-drafts`;
  const keep = (draft: DraftDto): DraftDto => {
    client.setQueryData(keys.draft(study, draft.id), draft);
    void client.invalidateQueries({ queryKey: keys.list(study) });
    return draft;
  };
  return {
    begin: async (body: StartDraftBody) => keep((await api<DraftDto>(path, { method: 'POST', body })).data),
    save: async (id: string, body: DraftContentBody, ifMatch: number) =>
      keep((await api<DraftDto>(`${path}/${id}`, { method: 'PUT', body, ifMatch })).data),
    discard: async (id: string, reason: string, ifMatch: number) => {
      const address = `${path}/${id}/discarding`;
      return keep((await api<DraftDto>(address, { method: 'POST', body: { reason }, ifMatch })).data);
    },
    publish: async (id: string, reason: string, ifMatch: number) => {
      const address = `${path}/${id}/publication`;
      const { data } = await api<VersionDto>(address, { method: 'POST', body: { reason }, ifMatch });
      await client.invalidateQueries({ queryKey: keys.all(study) });
      return data;
    },
  };
}
