import type { EntityManager } from '@mikro-orm/postgresql';
import { act, systemChain } from '#backend/database/act.ts';
import { currentPersonId } from '#backend/http/actor.ts';
import { assertRevision } from '#backend/http/preconditions.ts';
import { notFound, Problem, stateForbids } from '#backend/http/problem.ts';
import { queueMail } from '#backend/jobs/mail/outbox.ts';
import { MembershipSchema } from './membership.entity.ts';
import { invitationHours, openLink, resetMinutes } from './one-time-link.ts';
import { PersonSchema, type Person } from './person.entity.ts';

export interface NewPerson {
  email: string;
  name: string;
  /** An account with a password is open at once: for the invented people of a demo; everyone else is invited. */
  passwordHash?: string;
}

const aboutPerson = (kind: string, reason: string | null = null) => ({
  kind,
  reason,
  subject: ({ id }: Person) => ({ type: 'person', id }),
  studyId: systemChain,
});

/** Makes an account without telling anybody. */
export const createPerson = (em: EntityManager, person: NewPerson): Promise<Person> =>
  act(em, aboutPerson('person-invited'), (tx) => addPerson(tx, person));

/** Makes an account and mails its owner the link at which a password is chosen. */
export const invitePerson = (em: EntityManager, { email, name }: NewPerson): Promise<Person> =>
  act(em, aboutPerson('person-invited'), async (tx) => {
    const person = await addPerson(tx, { email, name });
    await mailInvitation(tx, person);
    return person;
  });

/** Sends the invitation once more; the link sent before no longer works. */
export const inviteAgain = (em: EntityManager, personId: string): Promise<Person> =>
  act(em, aboutPerson('person-invited'), async (tx) => {
    const person = await knownPerson(tx, personId);
    if (person.status !== 'invited')
      throw stateForbids('This invitation was accepted; start a password reset.');
    await mailInvitation(tx, person);
    return person;
  });

/** Mails a link at which its owner chooses a new password; nobody else ever sets or sees one (ES-04). */
export const startPasswordReset = (em: EntityManager, personId: string): Promise<Person> =>
  act(em, aboutPerson('password-reset-started'), async (tx) => {
    const person = await knownPerson(tx, personId);
    if (person.status !== 'active') throw stateForbids('Only an active account has a password to reset.');
    const path = await openLink(tx, person.id, 'password-reset');
    await queueMail(tx, {
      to: person.email,
      template: 'password-reset',
      params: { path, validMinutes: resetMinutes },
    });
    return person;
  });

/** Closes an account for good: its sessions end now, its memberships give nothing, its name stays on what it did. */
export const deactivatePerson = (
  em: EntityManager,
  personId: string,
  seenRevision: number,
  { reason }: { reason: string },
): Promise<Person> =>
  act(em, aboutPerson('person-deactivated', reason), async (tx) => {
    const person = await knownPerson(tx, personId);
    assertRevision(person, seenRevision);
    if (person.status === 'deactivated') throw stateForbids('This account is deactivated already.');
    if (person.id === currentPersonId())
      throw stateForbids('Another administrator has to deactivate your account.');
    person.status = 'deactivated';
    person.sessionEpoch += 1;
    return person;
  });

/**
 * Invites the installation's first administrator and answers the path of the one-time link.
 * Repeated while nobody has accepted, it makes a new link; with an administrator at work it refuses.
 */
export const inviteFirstAdministrator = async (
  em: EntityManager,
  { email, name }: NewPerson,
): Promise<{ path: string; validHours: number }> => {
  const administrators = await em.find(MembershipSchema, { role: 'administrator', status: 'active' });
  const people = await em.find(PersonSchema, { id: { $in: administrators.map(({ personId }) => personId) } });
  if (people.some(({ status }) => status === 'active')) {
    throw stateForbids('There is an administrator already, who invites everyone else.');
  }
  const invited = people.find(({ status }) => status === 'invited');
  if (invited !== undefined && invited.email !== email.toLowerCase()) {
    throw stateForbids(`${invited.email} is invited already; give that address for a new link.`);
  }
  let path = '';
  await act(em, aboutPerson('person-invited'), async (tx) => {
    const person = invited ?? (await addPerson(tx, { email, name }));
    await tx.flush();
    if (invited === undefined) {
      tx.create(MembershipSchema, { personId: person.id, role: 'administrator', siteIds: null });
    }
    path = await openLink(tx, person.id, 'invitation');
    return person;
  });
  return { path, validHours: invitationHours };
};

const knownPerson = (tx: EntityManager, id: string): Promise<Person> =>
  tx.findOneOrFail(PersonSchema, id, { failHandler: () => notFound('This person') });

async function addPerson(tx: EntityManager, { email, name, passwordHash }: NewPerson): Promise<Person> {
  const address = email.toLowerCase();
  // A deactivated account counts too: a sign-in name is never handed on (ES-05).
  if ((await tx.count(PersonSchema, { email: address })) > 0) {
    const detail = 'has an account already, active or not; a sign-in name is never given twice';
    throw new Problem(409, 'already-exists', `This address ${detail}.`, [{ pointer: '/email', detail }]);
  }
  return tx.create(PersonSchema, {
    email: address,
    name: name.trim(),
    ...(passwordHash === undefined
      ? {}
      : { passwordHash, status: 'active' as const, declarationAcceptedAt: new Date() }),
  });
}

async function mailInvitation(tx: EntityManager, person: Person): Promise<void> {
  await tx.flush();
  const path = await openLink(tx, person.id, 'invitation');
  await queueMail(tx, {
    to: person.email,
    template: 'invitation',
    params: { path, validHours: invitationHours },
  });
}
