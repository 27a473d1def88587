import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import type { SignaturePreparationDto, SignatureDto, SignVisitBody } from '#schemas/api/records.ts';
import { api } from '../../../lib/api.ts';

const key = (study: string, visitId: string) => ['signatures', study, visitId] as const;

export const signaturesQuery = (study: string, visitId: string) =>
  queryOptions({
    queryKey: key(study, visitId),
    queryFn: async ({ signal }) =>
      (await api<SignatureDto[]>(`/studies/${study}/visits/${visitId}/signatures`, { signal })).data,
  });

/** What would be signed now. It holds for five minutes, so it is asked for anew each time. */
export const preparationQuery = (study: string, visitId: string) =>
  queryOptions({
    queryKey: ['signature-preparation', study, visitId],
    queryFn: async ({ signal }) =>
      (
        await api<SignaturePreparationDto>(`/studies/${study}/visits/${visitId}/signature-preparation`, {
          signal,
        })
      ).data,
    staleTime: 0,
    gcTime: 0,
    refetchOnWindowFocus: false,
    refetchOnReconnect: false,
  });

export function useSignVisit(study: string, visitId: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: SignVisitBody) =>
      api<SignatureDto[]>(`/studies/${study}/visits/${visitId}/signatures`, { method: 'POST', body }),
    onSuccess: async ({ data }) => {
      client.setQueryData(key(study, visitId), data);
      await client.invalidateQueries({ queryKey: ['now', study] });
    },
  });
}
