import type { Request } from 'express';
import { actingBody, sessionDto, signInBody, statusDto, type ActingBody } from '#schemas/api/accounts.ts';
import { act, systemChain } from '#backend/database/act.ts';
import { productVersion } from '#backend/database/version.ts';
import { currentPersonId } from '#backend/http/actor.ts';
import type { Deps } from '#backend/http/deps.ts';
import { notFound } from '#backend/http/problem.ts';
import type { RouteTable } from '#backend/http/route.ts';
import { demoAccounts } from './demo-accounts.ts';
import { fromCallback } from './from-callback.ts';
import { MembershipSchema } from './membership.entity.ts';
import { PersonSchema } from './person.entity.ts';
import { presentSession } from './session.presenter.ts';
import { configureSignIn } from './sign-in.ts';

/** Sign in and out, and the choice of study and role acted in. */
export function declareSessionRoutes({ route }: RouteTable, deps: Deps): void {
  const { orm, settings } = deps;
  const signIn = configureSignIn(deps);

  route({
    method: 'get',
    path: '/status',
    summary: 'Which release this is, and the accounts of a demo system',
    gate: 'public',
    responds: { status: 200, body: statusDto },
    acts: null,
    handler: (_request, response) => {
      response.json({ version: productVersion, demo: settings.demo ? { accounts: demoAccounts } : null });
    },
  });

  route({
    method: 'post',
    path: '/session',
    summary: 'Sign in',
    gate: 'public',
    body: signInBody,
    responds: { status: 201, body: sessionDto },
    acts: ['signed-in', 'sign-in-refused'],
    handler: async (request, response) => {
      const person = await signIn(request);
      request.session.membershipId = await onlyMembership(person.id);
      response.status(201).json(await presentSession(deps, person.id, request.session.membershipId));
    },
  });

  route({
    method: 'get',
    path: '/session',
    summary: 'Who is signed in, and as what',
    gate: 'signed-in',
    responds: { status: 200, body: sessionDto },
    acts: null,
    handler: async (request, response) => {
      response.json(await presentSession(deps, currentPersonId(), request.session.membershipId));
    },
  });

  route({
    method: 'put',
    path: '/session/acting',
    summary: 'Choose the study and the role to act in',
    gate: 'signed-in',
    body: actingBody,
    responds: { status: 200, body: sessionDto },
    acts: [],
    handler: async (request, response) => {
      const { membershipId } = request.body as ActingBody;
      const personId = currentPersonId();
      const membership = await orm.em.findOne(MembershipSchema, {
        id: membershipId,
        personId,
        status: 'active',
      });
      if (membership === null) throw notFound('This membership');
      await renewSession(request, membership.id);
      response.json(await presentSession(deps, personId, membership.id));
    },
  });

  route({
    method: 'delete',
    path: '/session',
    summary: 'Sign out',
    gate: 'signed-in',
    responds: { status: 204, body: null },
    acts: [],
    handler: async (request, response) => {
      await endSession(request);
      response.clearCookie(settings.cookieName, { path: '/' }).status(204).end();
    },
  });

  route({
    method: 'post',
    path: '/session/sign-out-everywhere',
    summary: 'End every session of this account',
    gate: 'signed-in',
    responds: { status: 204, body: null },
    acts: ['signed-out-everywhere'],
    handler: async (request, response) => {
      const personId = currentPersonId();
      await act(
        orm.em,
        { kind: 'signed-out-everywhere', subject: { type: 'person', id: personId }, studyId: systemChain },
        async (tx) => {
          const person = await tx.findOneOrFail(PersonSchema, personId);
          person.sessionEpoch += 1;
        },
      );
      await endSession(request);
      response.clearCookie(settings.cookieName, { path: '/' }).status(204).end();
    },
  });

  /** Someone who can be only one thing need not be asked. */
  async function onlyMembership(personId: string): Promise<string | null> {
    const rows = await orm.em.find(MembershipSchema, { personId, status: 'active' }, { limit: 2 });
    return rows.length === 1 ? (rows[0]?.id ?? null) : null;
  }
}

/** A new session id whenever what one may do changes (WS-04); `logIn` regenerates it. */
async function renewSession(request: Request, membershipId: string): Promise<void> {
  const { user, session } = request;
  if (user === undefined) throw new Error('Nobody is signed in.');
  const { epoch, signedInAt } = session;
  await fromCallback((done) => request.logIn(user, done));
  Object.assign(request.session, { epoch, signedInAt, membershipId });
}

const endSession = (request: Request): Promise<void> => fromCallback((done) => request.session.destroy(done));
