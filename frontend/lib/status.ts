import { queryOptions } from '@tanstack/react-query';
import { api } from './api.ts';

export interface DemoAccount {
  email: string;
  password: string;
  name: string;
  /** In words: "coordinator, both studies". */
  roles: string;
}

export interface Status {
  version: string;
  /** Null on a real system. */
  demo: { accounts: DemoAccount[] } | null;
}

export const statusQuery = queryOptions({
  queryKey: ['status'],
  queryFn: async ({ signal }) => (await api<Status>('/status', { signal })).data,
  staleTime: Infinity,
});
