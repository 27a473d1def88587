import { LockMode, type EntityManager } from '@mikro-orm/postgresql';
import type { Role } from '#schemas/vocabulary/roles.ts';
import { act, systemChain } from '#backend/database/act.ts';
import { currentPersonId } from '#backend/http/actor.ts';
import { assertRevision } from '#backend/http/preconditions.ts';
import { invalidBody, notFound, stateForbids } from '#backend/http/problem.ts';
import { queueMail } from '#backend/jobs/mail/outbox.ts';
import { SiteSchema } from '../studies/site.entity.ts';
import { StudySchema } from '../studies/study.entity.ts';
import { conflictWithOthers, membershipProblems, type WantedMembership } from './membership-rules.ts';
import { MembershipSchema, type Membership } from './membership.entity.ts';
import { PersonSchema, type Person } from './person.entity.ts';

export interface NewMembership {
  personId: string;
  /** Null for an administrator, who belongs to no study. */
  studyId: string | null;
  role: Role;
  /** Null means all sites. */
  siteIds: string[] | null;
  unblinded: boolean;
  reason?: string;
}

/** Makes a person a member of a study, or an administrator. */
export const grantMembership = (em: EntityManager, wanted: NewMembership): Promise<Membership> =>
  act(em, about('membership-granted', wanted), async (tx) => {
    const person = await lockedPerson(tx, wanted.personId);
    if (person.status === 'deactivated') throw stateForbids('A deactivated account gets no membership.');
    await assertPossible(tx, wanted);
    const { personId, studyId, role, siteIds, unblinded } = wanted;
    const membership = tx.create(MembershipSchema, { personId, studyId, role, siteIds, unblinded });
    await tellOfChange(tx, person);
    return membership;
  });

/** Changes the sites or the blinding of a membership; another role is another membership. */
export async function changeMembership(
  em: EntityManager,
  membershipId: string,
  seenRevision: number,
  wanted: Pick<NewMembership, 'siteIds' | 'unblinded'> & { reason: string },
): Promise<Membership> {
  const { personId, studyId = null } = await knownMembership(em, membershipId);
  return act(em, about('membership-changed', { studyId, reason: wanted.reason }), async (tx) => {
    const person = await lockedPerson(tx, personId);
    const membership = await activeMembership(tx, membershipId, seenRevision);
    await assertPossible(tx, { ...wanted, personId, studyId, role: membership.role }, membership);
    membership.siteIds = wanted.siteIds;
    membership.unblinded = wanted.unblinded;
    await tellOfChange(tx, person);
    return membership;
  });
}

/** Ends a membership; what it allowed is gone with the person's next request (AC-04). */
export async function revokeMembership(
  em: EntityManager,
  membershipId: string,
  seenRevision: number,
  { reason }: { reason: string },
): Promise<Membership> {
  const { personId, studyId = null } = await knownMembership(em, membershipId);
  return act(em, about('membership-revoked', { studyId, reason }), async (tx) => {
    const person = await lockedPerson(tx, personId);
    const membership = await activeMembership(tx, membershipId, seenRevision);
    if (membership.role === 'administrator' && personId === currentPersonId()) {
      throw stateForbids('Another administrator has to revoke your membership.');
    }
    membership.status = 'revoked';
    await tellOfChange(tx, person);
    return membership;
  });
}

/** A study's memberships stand in its own chain, where its investigator reads them. */
const about = (kind: string, { studyId, reason }: { studyId: string | null; reason?: string }) => ({
  kind,
  reason: reason ?? null,
  subject: ({ id }: Membership) => ({ type: 'membership', id }),
  studyId: studyId ?? systemChain,
});

async function knownMembership(em: EntityManager, id: string): Promise<Membership> {
  return em.findOneOrFail(MembershipSchema, id, { failHandler: () => notFound('This membership') });
}

async function activeMembership(tx: EntityManager, id: string, seenRevision: number): Promise<Membership> {
  const membership = await tx.findOneOrFail(MembershipSchema, id, { refresh: true });
  assertRevision(membership, seenRevision);
  if (membership.status === 'revoked') throw stateForbids('This membership was revoked already.');
  return membership;
}

/** One person's memberships change one after the other, so that no two of them can contradict each other. */
const lockedPerson = (tx: EntityManager, id: string): Promise<Person> =>
  tx.findOneOrFail(PersonSchema, id, {
    lockMode: LockMode.PESSIMISTIC_WRITE,
    refresh: true,
    failHandler: () => notFound('This person'),
  });

async function assertPossible(
  tx: EntityManager,
  wanted: WantedMembership & Pick<NewMembership, 'personId' | 'studyId'>,
  itself?: Membership,
): Promise<void> {
  const held = (await tx.find(MembershipSchema, { personId: wanted.personId }, { refresh: true })).filter(
    ({ id }) => id !== itself?.id,
  );
  assertKeptApart(wanted, held);
  if (wanted.studyId === null) return;
  const study = await tx.findOneOrFail(StudySchema, wanted.studyId, {
    failHandler: () => notFound('This study'),
  });
  const sites = await tx.find(SiteSchema, { studyId: study.id });
  const problems = membershipProblems(
    wanted,
    sites.map(({ id }) => id),
  );
  if (problems.length > 0) throw invalidBody(problems);
  const here = held.filter(({ studyId }) => studyId === study.id);
  const past = itself === undefined ? [] : [{ ...itself, status: 'revoked' as const }];
  // Once the study is unblinded there is nothing left that a former membership could have told.
  const counted =
    study.state === 'unblinded' ? here.filter(({ status }) => status === 'active') : [...here, ...past];
  const conflict = conflictWithOthers(wanted, counted);
  if (conflict !== null) throw stateForbids(conflict);
}

/** An administrator sees no participant's data, not even by another membership (AC-05). */
function assertKeptApart(wanted: { role: Role; studyId: string | null }, held: readonly Membership[]): void {
  const administrates = wanted.role === 'administrator';
  if (administrates !== (wanted.studyId === null)) {
    const detail = administrates ? 'An administrator belongs to no study.' : 'Name the study of this role.';
    throw invalidBody([{ pointer: '/studyCode', detail }]);
  }
  const active = held.filter(({ status }) => status === 'active');
  if (administrates && active.some(({ role }) => role === 'administrator')) {
    throw stateForbids('This person is an administrator already.');
  }
  if (active.some(({ role }) => (role === 'administrator') !== administrates)) {
    throw stateForbids('An administrator holds no role in a study; the two are kept apart.');
  }
}

/** People hear of changes to their rights; who has not accepted the invitation yet hears by that. */
async function tellOfChange(tx: EntityManager, { email, status }: Person): Promise<void> {
  if (status !== 'active') return;
  await queueMail(tx, { to: email, template: 'account-changed', params: { change: 'role' } });
}
