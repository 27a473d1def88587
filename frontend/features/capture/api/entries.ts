import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import type { CompleteEntryBody, EntryDto, HistoryLineDto, Operation } from '#schemas/api/capture.ts';
import type { InstrumentSchema } from '#schemas/instruments/instrument.ts';
import { api } from '../../../lib/api.ts';

/** A published version as the form needs it; it never changes, so it is fetched once. */
export interface InstrumentVersion {
  id: string;
  key: string;
  version: number;
  title: string;
  hash: string;
  schema: InstrumentSchema;
}

export const instrumentQuery = (study: string, versionId: string) =>
  queryOptions({
    queryKey: ['instrument-version', study, versionId],
    queryFn: async ({ signal }) =>
      (await api<InstrumentVersion>(`/studies/${study}/instrument-versions/${versionId}`, { signal })).data,
    staleTime: Infinity,
  });

const entryKey = (study: string, id: string) => ['entry', study, id] as const;

export const entryQuery = (study: string, id: string) =>
  queryOptions({
    queryKey: entryKey(study, id),
    queryFn: async ({ signal }) => (await api<EntryDto>(`/studies/${study}/entries/${id}`, { signal })).data,
  });

export const historyQuery = (study: string, id: string, revision: number) =>
  queryOptions({
    queryKey: [...entryKey(study, id), 'history', revision],
    queryFn: async ({ signal }) =>
      (await api<HistoryLineDto[]>(`/studies/${study}/entries/${id}/history`, { signal })).data,
  });

/** Opens the entry of a step; asked twice, the same one is given. */
export function useOpenEntry(study: string, visitId: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (stepKey: string) =>
      api<EntryDto>(`/studies/${study}/visits/${visitId}/entries`, { method: 'POST', body: { stepKey } }),
    onSuccess: async ({ data }) => {
      client.setQueryData(entryKey(study, data.id), data);
      await client.invalidateQueries({ queryKey: ['visit', study, visitId] });
    },
  });
}

export type EntryAct =
  | { path: 'completion'; body: CompleteEntryBody }
  | { path: 'voiding'; body: { reason: string } }
  | { path: 'corrections'; body: { operations: Operation[]; reason: string } };

/** Completes, voids or corrects an entry at the revision that was seen. */
export function useEntryAct(study: string, entry: Pick<EntryDto, 'id' | 'visitId'>) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: ({ revision, path, body }: EntryAct & { revision: number }) =>
      api<EntryDto>(`/studies/${study}/entries/${entry.id}/${path}`, {
        method: 'POST',
        ifMatch: revision,
        idempotencyKey: crypto.randomUUID(),
        body,
      }),
    onSuccess: async ({ data }) => {
      client.setQueryData(entryKey(study, data.id), data);
      await client.invalidateQueries({ queryKey: ['visit', study, data.visitId] });
    },
  });
}
