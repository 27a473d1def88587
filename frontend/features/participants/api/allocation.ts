import { infiniteQueryOptions, queryOptions, useQueryClient } from '@tanstack/react-query';
import type {
  AllocationDto,
  SealAllocationBody,
  UnblindingDto,
  WorklistItemDto,
} from '#schemas/api/participants.ts';
import type { OpenedAllocation } from '#schemas/participants/verify-allocation.ts';
import { api, queryString } from '#frontend/lib/api.ts';
import { sessionQuery } from '#frontend/lib/session/session.ts';

const keys = {
  overview: (studyCode: string) => ['allocation', studyCode, 'overview'] as const,
  worklist: (studyCode: string) => ['allocation', studyCode, 'worklist'] as const,
  opened: (studyCode: string) => ['allocation', studyCode, 'opened'] as const,
  unblinding: (studyCode: string) => ['allocation', studyCode, 'unblinding'] as const,
};

export const allocationQuery = (studyCode: string) =>
  queryOptions({
    queryKey: keys.overview(studyCode),
    queryFn: async ({ signal }) =>
      (await api<AllocationDto>(`/studies/${studyCode}/allocation`, { signal })).data,
  });

export const worklistQuery = (studyCode: string) =>
  infiniteQueryOptions({
    queryKey: keys.worklist(studyCode),
    queryFn: async ({ pageParam, signal }) =>
      (
        await api<{ items: WorklistItemDto[]; nextCursor: string | null }>(
          `/studies/${studyCode}/allocation/worklist${queryString({ cursor: pageParam, limit: 100 })}`,
          { signal },
        )
      ).data,
    initialPageParam: '',
    getNextPageParam: ({ nextCursor }) => nextCursor ?? undefined,
  });

export const openedQuery = (studyCode: string) =>
  queryOptions({
    queryKey: keys.opened(studyCode),
    queryFn: async ({ signal }) =>
      (await api<OpenedAllocation>(`/studies/${studyCode}/allocation/opened`, { signal })).data,
  });

export const unblindingQuery = (studyCode: string) =>
  queryOptions({
    queryKey: keys.unblinding(studyCode),
    queryFn: async ({ signal }) =>
      (await api<UnblindingDto>(`/studies/${studyCode}/unblinding`, { signal })).data,
  });

/** Sealing the list, and the two hands of an unblinding. */
export function useAllocationActs(studyCode: string) {
  const client = useQueryClient();
  const path = `/studies/${studyCode}`;

  return {
    seal: async (body: SealAllocationBody): Promise<void> => {
      const { data } = await api<AllocationDto>(`${path}/allocation`, { method: 'POST', body });
      client.setQueryData(keys.overview(studyCode), data);
    },
    requestUnblinding: async (body: { reason: string; password: string }): Promise<void> => {
      const { data } = await api<UnblindingDto>(`${path}/unblinding`, { method: 'POST', body });
      client.setQueryData(keys.unblinding(studyCode), data);
    },
    confirmUnblinding: async (password: string, revision: number): Promise<void> => {
      const { data } = await api<UnblindingDto>(`${path}/unblinding/confirmation`, {
        method: 'POST',
        body: { password },
        ifMatch: revision,
      });
      client.setQueryData(keys.unblinding(studyCode), data);
      // Everything that was hidden is so no longer, the session's own rules included.
      void client.invalidateQueries({ queryKey: sessionQuery.queryKey, refetchType: 'all' });
      void client.invalidateQueries();
    },
  };
}
