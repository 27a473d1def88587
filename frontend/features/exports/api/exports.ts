import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import type { RunDto } from '#schemas/api/analysis.ts';
import type { DecideExportBody, ExportDto, RequestExportBody } from '#schemas/api/exports.ts';
import { api, apiFile } from '../../../lib/api.ts';

const keys = {
  all: (study: string) => ['exports', study] as const,
  one: (study: string, id: string) => ['exports', study, id] as const,
};

/** Approved or building: it changes by itself. */
const moves = ({ state }: Pick<ExportDto, 'state'>): boolean => state === 'approved' || state === 'building';

export const exportsQuery = (study: string) =>
  queryOptions({
    queryKey: keys.all(study),
    queryFn: async ({ signal }) => (await api<ExportDto[]>(`/studies/${study}/exports`, { signal })).data,
    refetchInterval: ({ state }) => (state.data?.some(moves) ? 2000 : false),
  });

export const exportQuery = (study: string, id: string) =>
  queryOptions({
    queryKey: keys.one(study, id),
    queryFn: async ({ signal }) => (await api<ExportDto>(`/studies/${study}/exports/${id}`, { signal })).data,
    refetchInterval: ({ state }) => (state.data && moves(state.data) ? 1000 : false),
  });

/** Finished runs on final cuts: those that can be exported. */
export const exportableRunsQuery = (study: string) =>
  queryOptions({
    queryKey: ['runs', study, 'exportable'],
    queryFn: async ({ signal }) =>
      (await api<RunDto[]>(`/studies/${study}/runs`, { signal })).data.filter(
        ({ state, cut }) => state === 'done' && cut.kind === 'final',
      ),
  });

export function useRequestExport(study: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: RequestExportBody) =>
      api<ExportDto>(`/studies/${study}/exports`, { method: 'POST', body }),
    onSuccess: () => client.invalidateQueries({ queryKey: keys.all(study) }),
  });
}

export function useDecideExport(study: string, { id, revision }: Pick<ExportDto, 'id' | 'revision'>) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: DecideExportBody) =>
      api<ExportDto>(`/studies/${study}/exports/${id}/decision`, { method: 'POST', ifMatch: revision, body }),
    onSuccess: ({ data }) => client.setQueryData(keys.one(study, id), data),
    onSettled: () =>
      Promise.all([
        client.invalidateQueries({ queryKey: keys.all(study) }),
        client.invalidateQueries({ queryKey: ['now', study] }),
      ]),
  });
}

/** Takes the file, which can be taken once. */
export function useDownloadExport(study: string, id: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: () => apiFile(`/studies/${study}/exports/${id}/download`, { method: 'POST', body: {} }),
    onSettled: () => client.invalidateQueries({ queryKey: keys.all(study) }),
  });
}
