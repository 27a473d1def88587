import type { Request } from 'express';
import { setTimeout as sleep } from 'node:timers/promises';
import {
  acceptInvitationBody,
  invitedPersonDto,
  newPasswordBody,
  passwordResetBody,
  tokenBody,
  type AcceptInvitationBody,
  type NewPasswordBody,
  type PasswordResetBody,
  type TokenBody,
} from '#schemas/api/people.ts';
import { runAs } from '#backend/http/actor.ts';
import type { Deps } from '#backend/http/deps.ts';
import { rateLimit } from '#backend/http/rate-limit.ts';
import type { RouteTable } from '#backend/http/route.ts';
import { acceptInvitation, completePasswordReset, invitedPerson } from './invitation.service.ts';
import { startPasswordReset } from './people.service.ts';
import { asPerson } from './person-actor.ts';
import { PersonSchema } from './person.entity.ts';

/** Longer than the work takes, so that the answer's time tells nothing (EM-04). */
const resetAnswerMilliseconds = 300;

/** One-time links: an account is opened, or gets a new password. Tokens come in bodies, never in addresses. */
export function declareInvitationRoutes({ route }: RouteTable, { orm, pool }: Deps): void {
  const linksBySource = rateLimit(pool, 'link-source', { points: 30, seconds: 300 });
  const resetsBySource = rateLimit(pool, 'reset-source', { points: 20, seconds: 300 });
  const resetsByAddress = rateLimit(pool, 'reset-address', { points: 5, seconds: 3600 });
  const takeLink = (request: Request): Promise<void> => linksBySource.take(request.ip ?? 'unknown');

  route({
    method: 'post',
    path: '/invitations/look-up',
    summary: 'Whom an invitation is for',
    gate: 'public',
    body: tokenBody,
    responds: { status: 200, body: invitedPersonDto },
    acts: [],
    handler: async (request, response) => {
      await takeLink(request);
      const { name, email } = await invitedPerson(orm.em, (request.body as TokenBody).token);
      response.json({ name, email });
    },
  });

  route({
    method: 'post',
    path: '/invitations/acceptance',
    summary: 'Open the account: choose a password, accept the declaration',
    gate: 'public',
    body: acceptInvitationBody,
    responds: { status: 204, body: null },
    acts: ['invitation-accepted'],
    handler: async (request, response) => {
      await takeLink(request);
      const { token, password } = request.body as AcceptInvitationBody;
      await acceptInvitation(orm.em, token, password);
      response.status(204).end();
    },
  });

  route({
    method: 'post',
    path: '/password-resets',
    summary: 'Ask for a link to a new password; the answer is the same for every address',
    gate: 'public',
    body: passwordResetBody,
    responds: { status: 202, body: null },
    acts: ['password-reset-started'],
    handler: async (request, response) => {
      const email = (request.body as PasswordResetBody).email.toLowerCase();
      await resetsBySource.take(request.ip ?? 'unknown');
      await resetsByAddress.take(email);
      await Promise.all([startResetIfKnown(email), sleep(resetAnswerMilliseconds)]);
      response.status(202).end();
    },
  });

  route({
    method: 'post',
    path: '/password-resets/completion',
    summary: 'Choose the new password; every session of the account ends',
    gate: 'public',
    body: newPasswordBody,
    responds: { status: 204, body: null },
    acts: ['password-changed'],
    handler: async (request, response) => {
      await takeLink(request);
      const { token, password } = request.body as NewPasswordBody;
      await completePasswordReset(orm.em, token, password);
      response.status(204).end();
    },
  });

  async function startResetIfKnown(email: string): Promise<void> {
    const person = await orm.em.findOne(PersonSchema, { email, status: 'active' });
    if (person === null) return;
    await runAs(asPerson(person), () => startPasswordReset(orm.em, person.id));
  }
}
