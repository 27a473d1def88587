import { infiniteQueryOptions, queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import type { RunSheetDto, VisitDto } from '#schemas/api/capture.ts';
import type { VerificationDto, VerifyBody } from '#schemas/api/monitoring.ts';
import { api, queryString } from '../../../lib/api.ts';

const key = (study: string, visitId: string) => ['verification', study, visitId] as const;

export const verificationQuery = (study: string, visitId: string) =>
  queryOptions({
    queryKey: key(study, visitId),
    queryFn: async ({ signal }) =>
      (await api<VerificationDto>(`/studies/${study}/visits/${visitId}/verification`, { signal })).data,
  });

/** The completed visits, a page after the other. */
export const completedVisitsQuery = (study: string) =>
  infiniteQueryOptions({
    queryKey: ['visits', study, 'completed'],
    queryFn: async ({ pageParam, signal }) =>
      (
        await api<{ items: VisitDto[]; nextCursor: string | null }>(
          `/studies/${study}/visits${queryString({ state: 'completed', cursor: pageParam, limit: 200 })}`,
          { signal },
        )
      ).data,
    initialPageParam: '',
    getNextPageParam: ({ nextCursor }) => nextCursor ?? undefined,
  });

/** The visit that is compared with its source. */
export const verifiedVisitQuery = (study: string, visitId: string) =>
  queryOptions({
    queryKey: ['visit', study, visitId, 'head'],
    queryFn: async ({ signal }) =>
      (await api<RunSheetDto>(`/studies/${study}/visits/${visitId}`, { signal })).data.visit,
  });

export function useVerify(study: string, visitId: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: VerifyBody) =>
      api<VerificationDto>(`/studies/${study}/visits/${visitId}/verification`, { method: 'POST', body }),
    onSuccess: ({ data }) => client.setQueryData(key(study, visitId), data),
    // An entry changed meanwhile: what it holds now is what must be compared.
    onError: () => client.invalidateQueries({ queryKey: key(study, visitId) }),
  });
}

export function useClearMark(study: string, visitId: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: ({ id, reason }: { id: string; reason: string }) =>
      api(`/studies/${study}/verification-marks/${id}/clearing`, { method: 'POST', body: { reason } }),
    onSettled: () => client.invalidateQueries({ queryKey: key(study, visitId) }),
  });
}
