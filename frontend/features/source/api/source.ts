import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import type { SourceDocumentDto, UploadSourceQuery } from '#schemas/api/source.ts';
import { api, apiFile, queryString } from '../../../lib/api.ts';

const key = (study: string, visitId: string) => ['source-documents', study, visitId] as const;

const contentPath = (study: string, id: string): string => `/studies/${study}/source-documents/${id}/content`;

/** Address of a document's bytes, for a reader that fetches them itself. */
export const contentUrl = (study: string, id: string): string => `/api/v1${contentPath(study, id)}`;

export const sourcesQuery = (study: string, visitId: string) =>
  queryOptions({
    queryKey: key(study, visitId),
    queryFn: async ({ signal }) =>
      (await api<SourceDocumentDto[]>(`/studies/${study}/visits/${visitId}/source-documents`, { signal }))
        .data,
  });

/** The bytes of a document; they never change, and leave memory soon after they were shown. */
export const contentQuery = (study: string, id: string) =>
  queryOptions({
    queryKey: ['source-content', study, id],
    queryFn: ({ signal }) => apiFile(contentPath(study, id), { signal }),
    staleTime: Infinity,
    gcTime: 60_000,
  });

export function useUploadSource(study: string, visitId: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: ({ file, ...about }: UploadSourceQuery & { file: Blob }) =>
      api<SourceDocumentDto>(
        `/studies/${study}/visits/${visitId}/source-documents${queryString({ ...about })}`,
        { method: 'POST', body: file },
      ),
    onSuccess: () => client.invalidateQueries({ queryKey: key(study, visitId) }),
  });
}

/** Puts `newer` in the place of `older`; marks that stood on the older fall. */
export function useReplaceSource(study: string, visitId: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: ({ newer, older, reason }: { newer: string; older: SourceDocumentDto; reason: string }) =>
      api<SourceDocumentDto>(`/studies/${study}/source-documents/${newer}/replacing`, {
        method: 'POST',
        ifMatch: older.revision,
        body: { replaces: older.id, reason },
      }),
    onSettled: () =>
      Promise.all([
        client.invalidateQueries({ queryKey: key(study, visitId) }),
        client.invalidateQueries({ queryKey: ['verification', study, visitId] }),
      ]),
  });
}
