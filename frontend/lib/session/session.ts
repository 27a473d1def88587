import { queryOptions } from '@tanstack/react-query';
import { createContext, useContext } from 'react';
import type { Role } from '#schemas/vocabulary/roles.ts';
import { api, ApiProblem } from '../api.ts';
import type { PackedRules } from './ability.ts';

export interface SessionSite {
  id: string;
  code: string;
  name: string;
  /** IANA zone, for times taken there. */
  zone?: string;
}

export interface SessionMembership {
  membershipId: string;
  /** Null for the administrator, who belongs to no study. */
  studyCode: string | null;
  studyName: string | null;
  role: Role;
  sites: SessionSite[];
  unblinded: boolean;
}

export interface Session {
  person: { id: string; name: string; email: string };
  memberships: SessionMembership[];
  /** The membership acted in; null until one is chosen. */
  acting: SessionMembership | null;
  /** The actor's rules, packed by CASL; the server applies the same ones and has the last word. */
  rules: PackedRules;
  /** Base64 of 32 bytes that only this person is given: seals what waits on the device. */
  deviceKey?: string;
  /** Minutes without a request after which the server ends the session. */
  idleMinutes?: number;
}

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
export function useActing(): SessionMembership & { studyCode: string; studyName: string } {
  const { acting } = useSession();
  const { studyCode, studyName } = acting ?? {};
  if (!acting || !studyCode) throw new Error('useActing is used outside of a study');
  return { ...acting, studyCode, studyName: studyName ?? studyCode };
}
