import { queryOptions } from '@tanstack/react-query';
import { createContext, useContext } from 'react';
import type { SessionDto } from '#schemas/api/accounts.ts';
import { api, ApiProblem } from '../api.ts';

/** Who is signed in, what they may be, what they are now. */
export type Session = SessionDto;
export type Acting = NonNullable<Session['acting']>;
export type Membership = Session['memberships'][number];

/** `null` when nobody is signed in. */
export const sessionQuery = queryOptions({
  queryKey: ['session'],
  queryFn: async ({ signal }): Promise<Session | null> => {
    try {
      return (await api<Session>('/session', { signal })).data;
    } catch (error) {
      if (error instanceof ApiProblem && error.status === 401) return null;
      throw error;
    }
  },
  staleTime: 60_000,
});

export const SessionContext = createContext<Session | undefined>(undefined);

/** The person signed in, also while a lost session waits for signing in again. */
export function useSession(): Session {
  const session = useContext(SessionContext);
  if (!session) throw new Error('useSession is used outside of the signed-in frame');
  return session;
}

/** The study and role acted in. On pages below `/studies/:studyCode`. */
export function useActing(): Acting & { studyCode: string; studyName: string } {
  const { acting } = useSession();
  const { studyCode, studyName } = acting ?? {};
  if (!acting || !studyCode) throw new Error('useActing is used outside of a study');
  return { ...acting, studyCode, studyName: studyName ?? studyCode };
}

/** The zone in which times are shown: the site's where there is one site, else this device's. */
export function useZone(): string | undefined {
  const { acting } = useSession();
  return acting?.sites.length === 1 ? acting.sites[0]?.timeZone : undefined;
}
