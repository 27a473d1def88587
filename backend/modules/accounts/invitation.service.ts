import type { EntityManager } from '@mikro-orm/postgresql';
import { act, systemChain } from '#backend/database/act.ts';
import { runAs } from '#backend/http/actor.ts';
import { queueMail } from '#backend/jobs/mail/outbox.ts';
import { spendLink, usableLink } from './one-time-link.ts';
import { assertGoodPassword, hashPassword } from './password.ts';
import { asPerson } from './person-actor.ts';
import { PersonSchema, type Person } from './person.entity.ts';

/** Whom an invitation is for; the link itself is the right to know. */
export async function invitedPerson(em: EntityManager, token: string): Promise<Person> {
  const { personId } = await usableLink(em, token, 'invitation');
  return em.findOneOrFail(PersonSchema, personId);
}

/** Opens the account: its owner chooses the password and accepts that a signature here binds like ink (ES-05). */
export async function acceptInvitation(em: EntityManager, token: string, password: string): Promise<void> {
  const link = await usableLink(em, token, 'invitation');
  const { person, passwordHash } = await chosenPassword(em, link.personId, password);
  await runAs(asPerson(person), () =>
    act(em, aboutPerson('invitation-accepted', person), async (tx) => {
      await spendLink(tx, link);
      const account = await tx.findOneOrFail(PersonSchema, person.id);
      account.passwordHash = passwordHash;
      account.status = 'active';
      account.declarationAcceptedAt = new Date();
    }),
  );
}

/** Sets the new password, ends every session of the account and tells its owner. */
export async function completePasswordReset(
  em: EntityManager,
  token: string,
  password: string,
): Promise<void> {
  const link = await usableLink(em, token, 'password-reset');
  const { person, passwordHash } = await chosenPassword(em, link.personId, password);
  await runAs(asPerson(person), () =>
    act(em, aboutPerson('password-changed', person), async (tx) => {
      await spendLink(tx, link);
      const account = await tx.findOneOrFail(PersonSchema, person.id);
      account.passwordHash = passwordHash;
      account.sessionEpoch += 1;
      await queueMail(tx, { to: account.email, template: 'account-changed', params: { change: 'password' } });
    }),
  );
}

const aboutPerson = (kind: string, { id }: Person) => ({
  kind,
  subject: { type: 'person', id },
  studyId: systemChain,
});

/** Hashing takes its time, so it is done before the act: locks stay short. */
async function chosenPassword(
  em: EntityManager,
  personId: string,
  password: string,
): Promise<{ person: Person; passwordHash: string }> {
  const person = await em.findOneOrFail(PersonSchema, personId);
  assertGoodPassword(password, person);
  return { person, passwordHash: await hashPassword(password) };
}
