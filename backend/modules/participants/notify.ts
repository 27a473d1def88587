import type { EntityManager } from '@mikro-orm/postgresql';
import type { Role } from '#schemas/vocabulary/roles.ts';
import { currentPersonId, currentStudyId } from '#backend/http/actor.ts';
import { queueMail } from '#backend/jobs/mail/outbox.ts';
import type { StudyEvent } from '#backend/jobs/mail/templates.ts';
import { MembershipSchema } from '../accounts/membership.entity.ts';
import { PersonSchema } from '../accounts/person.entity.ts';
import { StudySchema } from '../studies/study.entity.ts';

/** Tells the others in these roles that something happened in the study; never about whom, never what (EM-01). */
export async function tellOthers(
  tx: EntityManager,
  event: StudyEvent,
  roles: readonly Role[],
): Promise<void> {
  const { code, name } = await tx.findOneOrFail(StudySchema, currentStudyId());
  for (const to of await addressesOf(tx, roles)) {
    await queueMail(tx, {
      to,
      template: 'study-event',
      params: { event, study: name, path: `/studies/${code}/now` },
    });
  }
}

/** Asks the others in these roles to confirm an unblinding. */
export async function askToConfirm(tx: EntityManager, roles: readonly Role[]): Promise<void> {
  const { code, name } = await tx.findOneOrFail(StudySchema, currentStudyId());
  for (const to of await addressesOf(tx, roles)) {
    await queueMail(tx, {
      to,
      template: 'work-waiting',
      params: { waiting: 'unblinding', study: name, path: `/studies/${code}/unblinding` },
    });
  }
}

async function addressesOf(tx: EntityManager, roles: readonly Role[]): Promise<string[]> {
  const memberships = await tx.find(MembershipSchema, {
    studyId: currentStudyId(),
    role: { $in: [...roles] },
    status: 'active',
    personId: { $ne: currentPersonId() },
  });
  const people = await tx.find(PersonSchema, {
    id: { $in: memberships.map(({ personId }) => personId) },
    status: 'active',
  });
  return people.map(({ email }) => email).sort();
}
