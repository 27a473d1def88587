import { useMutation, useQueryClient } from '@tanstack/react-query';
import { api } from '../api.ts';
import { sessionQuery } from './session.ts';

export function useSignIn() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: { email: string; password: string }) =>
      api<unknown>('/session', { method: 'POST', body }),
    onSuccess: () => client.invalidateQueries({ queryKey: sessionQuery.queryKey, refetchType: 'all' }),
  });
}

/** Chooses the study and role to act in; what was read as another role is forgotten. */
export function useActAs() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (membershipId: string) =>
      api<unknown>('/session/acting', { method: 'PUT', body: { membershipId } }),
    onSuccess: async () => {
      client.removeQueries({
        predicate: ({ queryKey }) => queryKey[0] !== 'session' && queryKey[0] !== 'status',
      });
      await client.invalidateQueries({ queryKey: sessionQuery.queryKey, refetchType: 'all' });
    },
  });
}
