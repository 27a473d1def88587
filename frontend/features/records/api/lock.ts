import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import type { LockBody, OpenPointDto, StudyLockDto, UnlockBody } from '#schemas/api/records.ts';
import { api } from '../../../lib/api.ts';

export interface LockRecord {
  openPoints: OpenPointDto[];
  history: StudyLockDto[];
}

export const lockQuery = (study: string) =>
  queryOptions({
    queryKey: ['lock', study],
    queryFn: async ({ signal }) => (await api<LockRecord>(`/studies/${study}/lock`, { signal })).data,
  });

/** Locks the study, or opens it again; afterwards everything that was read may look different. */
export function useChangeLock(study: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (change: { path: 'lock'; body: LockBody } | { path: 'unlock'; body: UnlockBody }) =>
      api<StudyLockDto>(`/studies/${study}/${change.path}`, { method: 'POST', body: change.body }),
    onSuccess: () => client.invalidateQueries(),
    onError: () => client.invalidateQueries({ queryKey: ['lock', study] }),
  });
}
