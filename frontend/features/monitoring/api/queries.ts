import { infiniteQueryOptions, queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import type { AskQueryBody, QueryDto } from '#schemas/api/monitoring.ts';
import { api, queryString } from '../../../lib/api.ts';

const keys = {
  all: (study: string) => ['queries', study] as const,
  list: (study: string, state: string) => ['queries', study, 'list', state] as const,
  one: (study: string, id: string) => ['queries', study, 'one', id] as const,
};

export const queriesQuery = (study: string, state: string) =>
  infiniteQueryOptions({
    queryKey: keys.list(study, state),
    queryFn: async ({ pageParam, signal }) =>
      (
        await api<{ items: QueryDto[]; nextCursor: string | null }>(
          `/studies/${study}/queries${queryString({ state, cursor: pageParam, limit: 100 })}`,
          { signal },
        )
      ).data,
    initialPageParam: '',
    getNextPageParam: ({ nextCursor }) => nextCursor ?? undefined,
  });

export const queryThreadQuery = (study: string, id: string) =>
  queryOptions({
    queryKey: keys.one(study, id),
    queryFn: async ({ signal }) => (await api<QueryDto>(`/studies/${study}/queries/${id}`, { signal })).data,
  });

export function useAskQuery(study: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: AskQueryBody) => api<QueryDto>(`/studies/${study}/queries`, { method: 'POST', body }),
    onSuccess: () =>
      Promise.all([
        client.invalidateQueries({ queryKey: keys.all(study) }),
        client.invalidateQueries({ queryKey: ['verification', study] }),
      ]),
  });
}

export type QueryStep = 'replies' | 'settling' | 'reopening';

/** Writes on in a thread, guarded by the revision that was seen. */
export function useQueryStep(study: string, { id, revision }: Pick<QueryDto, 'id' | 'revision'>) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: ({ step, text }: { step: QueryStep; text: string }) =>
      api<QueryDto>(`/studies/${study}/queries/${id}/${step}`, {
        method: 'POST',
        ifMatch: revision,
        body: { text },
      }),
    onSuccess: ({ data }) => client.setQueryData(keys.one(study, id), data),
    // After a refusal too: the thread may have gone on, and what it says now is what the person answers.
    onSettled: () =>
      Promise.all([
        client.invalidateQueries({ queryKey: keys.all(study) }),
        client.invalidateQueries({ queryKey: ['verification', study] }),
        client.invalidateQueries({ queryKey: ['now', study] }),
      ]),
  });
}
