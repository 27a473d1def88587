import connectPgSimple from 'connect-pg-simple';
import type { RequestHandler } from 'express';
import session from 'express-session';
import type { Pool } from 'pg';
import type { Settings } from '../../config/settings.ts';

declare module 'express-session' {
  interface SessionData {
    /** The membership acted in; the person chooses it. */
    membershipId: string | null;
    /** The person's session number at sign-in: signing out everywhere raises it. */
    epoch: number;
    signedInAt: number;
  }
}

/** Idle half an hour, twelve hours at most (WS-04). */
export const idleLimit = 30 * 60_000;
export const absoluteLimit = 12 * 3_600_000;

/** Sessions in PostgreSQL: any process can serve any request. */
export function sessionMiddleware(settings: Settings, pool: Pool): RequestHandler {
  const Store = connectPgSimple(session);
  const secure = settings.cookieName.startsWith('__Host-');
  return session({
    name: settings.cookieName,
    secret: settings.sessionSecret,
    store: new Store({
      pool,
      tableName: 'session',
      createTableIfMissing: false,
      pruneSessionInterval: false,
    }),
    resave: false,
    saveUninitialized: false,
    rolling: true,
    cookie: { secure, httpOnly: true, sameSite: 'lax', path: '/', maxAge: idleLimit },
  });
}
