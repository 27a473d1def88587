import type { EntityManager } from '@mikro-orm/postgresql';
import type { Request } from 'express';
import passport from 'passport';
import { Strategy } from 'passport-local';
import { act, systemChain } from '#backend/database/act.ts';
import { runAs } from '#backend/http/actor.ts';
import type { Deps } from '#backend/http/deps.ts';
import { Problem } from '#backend/http/problem.ts';
import { rateLimit } from '#backend/http/rate-limit.ts';
import { fromCallback } from './from-callback.ts';
import { passwordMatches } from './password.ts';
import { asPerson, asSystem } from './person-actor.ts';
import { PersonSchema, type Person } from './person.entity.ts';

declare global {
  // passport declares its user in this namespace
  // eslint-disable-next-line @typescript-eslint/no-namespace
  namespace Express {
    interface User {
      id: string;
    }
  }
}

const refused = (): Problem =>
  new Problem(401, 'sign-in-refused', 'E-mail or password is not right, or the account is not active.');

/** Signs in by e-mail and password; each try counts against the account and against its source (WS-03). */
export function configureSignIn({ orm, pool }: Deps): (request: Request) => Promise<Person> {
  const byAccount = rateLimit(pool, 'sign-in-account', { points: 10, seconds: 300 });
  const bySource = rateLimit(pool, 'sign-in-source', { points: 100, seconds: 300 });

  passport.use(
    new Strategy({ usernameField: 'email', session: true }, (email, password, done) => {
      checkPassword(orm.em, email, password).then((person) => done(null, person ?? false), done);
    }),
  );
  passport.serializeUser((user, done) => done(null, user.id));
  passport.deserializeUser((id: string, done) => done(null, { id }));

  return async (request) => {
    const email = String((request.body as { email: string }).email).toLowerCase();
    await bySource.take(request.ip ?? 'unknown');
    await byAccount.take(email);
    const person = await authenticate(request);
    if (person === false) {
      await recordRefusal(orm.em, email);
      throw refused();
    }
    await byAccount.forget(email);
    await logIn(request, person);
    request.session.epoch = person.sessionEpoch;
    request.session.signedInAt = Date.now();
    request.session.membershipId = null;
    await runAs(asPerson(person), () =>
      act(
        orm.em,
        { kind: 'signed-in', subject: { type: 'person', id: person.id }, studyId: systemChain },
        async () => person,
      ),
    );
    return person;
  };
}

async function checkPassword(em: EntityManager, email: string, password: string): Promise<Person | null> {
  const person = await em.findOne(PersonSchema, { email: email.toLowerCase() });
  const right = await passwordMatches(person?.passwordHash, password);
  return right && person?.status === 'active' ? person : null;
}

async function authenticate(request: Request): Promise<Person | false> {
  let found: Person | false = false;
  await fromCallback((done) => {
    const callback = (error: unknown, person: Person | false | undefined): void => {
      found = person || false;
      done(error);
    };
    (passport.authenticate('local', callback) as (...args: unknown[]) => void)(request, request.res, done);
  });
  return found;
}

/** `logIn` regenerates the session: a session id known before sign-in is worth nothing after it. */
const logIn = (request: Request, person: Person): Promise<void> =>
  fromCallback((done) => request.logIn(person, done));

/** A refused try is on record under the account it was aimed at; an address without one leaves no trace of whether it exists. */
async function recordRefusal(em: EntityManager, email: string): Promise<void> {
  const person = await em.findOne(PersonSchema, { email });
  if (person === null) return;
  await runAs(asSystem, () =>
    act(
      em,
      { kind: 'sign-in-refused', subject: { type: 'person', id: person.id }, studyId: systemChain },
      async () => null,
    ),
  );
}
