import { MutationCache, QueryCache, QueryClient } from '@tanstack/react-query';
import { ApiProblem } from './api.ts';
import { sessionQuery } from './session/session.ts';

/** The store of server data. Nothing of it is written to the device (WS-13). */
export function createQueryClient(): QueryClient {
  const client: QueryClient = new QueryClient({
    queryCache: new QueryCache({ onError: noticeLostSession }),
    mutationCache: new MutationCache({ onError: noticeLostSession }),
    defaultOptions: {
      // 'always': without a network the request fails at once and the page can say so, instead of waiting mutely.
      queries: { networkMode: 'always', staleTime: 15_000, retry: worthRetrying },
      mutations: { networkMode: 'always', retry: false },
    },
  });

  /** The frame then asks to sign in again, over the page as it stands. */
  function noticeLostSession(error: Error) {
    if (error instanceof ApiProblem && error.status === 401) client.setQueryData(sessionQuery.queryKey, null);
  }
  return client;
}

function worthRetrying(failures: number, error: Error): boolean {
  if (error instanceof ApiProblem && error.status < 500) return false;
  return failures < 2;
}

/** The application's one; route loaders ask through it. */
export const queryClient = createQueryClient();
