import { LockMode, type EntityManager } from '@mikro-orm/postgresql';
import type { ConfirmUnblindingBody, SignedReasonBody, UnblindingDto } from '#schemas/api/participants.ts';
import { act } from '#backend/database/act.ts';
import { currentPersonId, currentStudyId } from '#backend/http/actor.ts';
import { authorize } from '#backend/http/authorize.ts';
import { assertRevision } from '#backend/http/preconditions.ts';
import { notAllowed, stateForbids } from '#backend/http/problem.ts';
import { confirmPassword } from '../accounts/index.ts';
import { PersonSchema } from '../accounts/person.entity.ts';
import { StudySchema, type Study } from '../studies/study.entity.ts';
import { UnblindingSchema, type Unblinding } from './allocation.entity.ts';
import { askToConfirm, tellOthers } from './notify.ts';

const aboutUnblinding = ({ id }: Unblinding) => ({ type: 'unblinding', id });

/** Asks for the planned unblinding of a locked study; another person has to confirm it (RB-08). */
export async function requestUnblinding(
  em: EntityManager,
  { reason, password }: SignedReasonBody,
): Promise<Unblinding> {
  assertLocked(await studyToUnblind(em));
  await confirmPassword(em, currentPersonId(), password);
  return act(em, { kind: 'unblinding-requested', subject: aboutUnblinding, reason }, async (tx) => {
    assertLocked(await lockedRow(tx));
    const pending = await tx.findOne(UnblindingSchema, { studyId: currentStudyId() });
    if (pending !== null && !(await isOutdated(tx, pending))) {
      throw stateForbids('Unblinding was asked for already; another person has to confirm it.');
    }
    await askToConfirm(tx, ['principal-investigator', 'statistician']);
    const asked = { requestedById: currentPersonId(), requestedAt: new Date(), reason };
    return pending === null
      ? tx.create(UnblindingSchema, { studyId: currentStudyId(), ...asked })
      : Object.assign(pending, asked);
  });
}

/** The second person unblinds the study: from here on conditions and unblinding values are open to all its members. */
export async function confirmUnblinding(
  em: EntityManager,
  seen: number,
  { password }: ConfirmUnblindingBody,
): Promise<Unblinding> {
  const known = await pendingRequest(em);
  assertRevision(known, seen);
  await studyToUnblind(em);
  assertOther(known);
  await confirmPassword(em, currentPersonId(), password);
  return act(em, { kind: 'unblinding-confirmed', subject: aboutUnblinding(known) }, async (tx) => {
    const study = await lockedRow(tx);
    assertLocked(study);
    const request = await pendingRequest(tx);
    assertRevision(request, seen);
    assertOther(request);
    if (await isOutdated(tx, request)) {
      throw stateForbids('The study was unlocked and locked again since; ask for the unblinding anew.');
    }
    request.confirmedById = currentPersonId();
    request.confirmedAt = new Date();
    study.state = 'unblinded';
    await tellOthers(tx, 'unblinded', [
      'principal-investigator',
      'coordinator',
      'unblinded-technician',
      'study-physician',
      'statistician',
      'monitor',
    ]);
    return request;
  });
}

/** How far the unblinding of the study is, and whose hands it took. */
export async function readUnblinding(em: EntityManager): Promise<UnblindingDto> {
  const study = await em.findOneOrFail(StudySchema, currentStudyId());
  const row = await em.findOne(UnblindingSchema, { studyId: study.id });
  if (row === null) return { studyState: study.state, request: null, confirmed: null };
  const nameOf = async (id: string): Promise<string> => (await em.findOneOrFail(PersonSchema, id)).name;
  return {
    studyState: study.state,
    request: {
      by: await nameOf(row.requestedById),
      byMe: row.requestedById === currentPersonId(),
      at: row.requestedAt.toISOString(),
      reason: row.reason,
      revision: row.revision,
    },
    confirmed:
      row.confirmedById == null || row.confirmedAt == null
        ? null
        : { by: await nameOf(row.confirmedById), at: row.confirmedAt.toISOString() },
  };
}

async function studyToUnblind(em: EntityManager): Promise<Study> {
  const study = await em.findOneOrFail(StudySchema, currentStudyId());
  authorize('unblind', 'Study', study);
  return study;
}

/** The study's row, held until the act commits: no unlocking passes it. */
const lockedRow = (tx: EntityManager): Promise<Study> =>
  tx.findOneOrFail(StudySchema, currentStudyId(), { lockMode: LockMode.PESSIMISTIC_WRITE, refresh: true });

function assertLocked({ state }: Study): void {
  if (state === 'unblinded') throw stateForbids('The study is unblinded already.');
  if (state !== 'locked')
    throw stateForbids('Lock the study first: unblinding comes after the last change of its data.');
}

async function pendingRequest(em: EntityManager): Promise<Unblinding> {
  const row = await em.findOne(UnblindingSchema, { studyId: currentStudyId() });
  if (row === null) throw stateForbids('Nobody has asked for the unblinding yet.');
  if (row.confirmedAt != null) throw stateForbids('The study is unblinded already.');
  return row;
}

function assertOther({ requestedById }: Unblinding): void {
  if (requestedById === currentPersonId())
    throw notAllowed('You asked for it: another person has to confirm.');
}

/** A request made under an earlier lock: what it asked for was unlocked since. */
async function isOutdated(tx: EntityManager, { requestedAt }: Unblinding): Promise<boolean> {
  const [row] = await tx.execute<{ at: string }[]>(
    `select at from audit_event where study_id = ? and kind = 'study-locked' order by sequence desc limit 1`,
    [currentStudyId()],
  );
  return row !== undefined && new Date(row.at) > requestedAt;
}
