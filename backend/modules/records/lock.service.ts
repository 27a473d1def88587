import type { EntityManager } from '@mikro-orm/postgresql';
import {
  openPointKinds,
  type LockBody,
  type OpenPointDto,
  type OpenPointKind,
  type UnlockBody,
} from '#schemas/api/records.ts';
import { act } from '#backend/database/act.ts';
import { currentPersonId, currentStudyId } from '#backend/http/actor.ts';
import { authorize } from '#backend/http/authorize.ts';
import { Problem, stateForbids } from '#backend/http/problem.ts';
import { confirmPassword } from '../accounts/index.ts';
import { VisitSchema } from '../capture/visit.entity.ts';
import { StudySchema, type Study } from '../studies/study.entity.ts';
import { verificationOf } from '../monitoring/index.ts';
import { StudyLockSchema, type StudyLock } from './records.entity.ts';
import { signaturesOf } from './signature.service.ts';

const count = async (em: EntityManager, sql: string, studyId: string): Promise<number> => {
  const [row] = await em.execute<{ n: string }[]>(sql, [studyId]);
  return Number(row?.n ?? 0);
};

/** Everything that is still open; each alone keeps the study from being locked (LK-02). */
export async function openPoints(em: EntityManager): Promise<OpenPointDto[]> {
  const studyId = currentStudyId();
  const points: Record<OpenPointKind, number> = {
    'open-queries': await count(
      em,
      `select count(*) as n from query where study_id = ? and state <> 'settled'`,
      studyId,
    ),
    'open-visits': await count(
      em,
      `select count(*) as n from visit where study_id = ? and state in ('planned', 'under-way')`,
      studyId,
    ),
    'open-entries': await count(
      em,
      `select count(*) as n from entry where study_id = ? and state = 'open'`,
      studyId,
    ),
    'unsigned-visits': 0,
    'unverified-fields': 0,
    'no-signed-plan':
      (await count(em, `select count(*) as n from plan_version where study_id = ?`, studyId)) > 0 ? 0 : 1,
  };
  for (const visit of await em.find(VisitSchema, { studyId, state: 'completed' })) {
    const signatures = await signaturesOf(em, visit);
    if (!signatures.some(({ state }) => state === 'covers')) points['unsigned-visits'] += 1;
    const { needed, done } = await verificationOf(em, visit);
    points['unverified-fields'] += needed - done;
  }
  return (Object.keys(points) as OpenPointKind[])
    .filter((kind) => points[kind] > 0)
    .map((kind) => ({ kind, label: openPointKinds[kind], count: points[kind] }));
}

/** Locks the study: from then on nobody edits by any road. What was open is named, with why it was let be. */
export async function lockStudy(
  em: EntityManager,
  { reason, password, overrides }: LockBody,
): Promise<StudyLock> {
  const study = await ownStudy(em);
  authorize('lock', 'Study', study);
  if (study.state !== 'running') throw stateForbids('Only a running study is locked.');
  await confirmPassword(em, currentPersonId(), password);
  const open = await openPoints(em);
  const given = new Map(overrides.map((override) => [override.kind, override.reason]));
  const bare = open.filter(({ kind }) => !given.has(kind));
  if (bare.length > 0) {
    throw new Problem(
      409,
      'state-forbids',
      'Some points are still open. Close them, or say for each why the study is locked all the same.',
      bare.map(({ kind, label, count: n }) => ({ pointer: `/overrides/${kind}`, detail: `${n} ${label}` })),
      { openPoints: open },
    );
  }
  return changeLock(
    em,
    study,
    'lock',
    reason,
    open.map(({ kind, count: n }) => ({ kind, count: n, override: given.get(kind) ?? null })),
  );
}

/** Unlocks with a reason; earlier cuts stay as they are. An unblinded study stays locked for good. */
export async function unlockStudy(em: EntityManager, { reason, password }: UnlockBody): Promise<StudyLock> {
  const study = await ownStudy(em);
  authorize('lock', 'Study', study);
  if (study.state !== 'locked')
    throw stateForbids('Only a locked study that was not unblinded can be unlocked.');
  await confirmPassword(em, currentPersonId(), password);
  return changeLock(em, study, 'unlock', reason, []);
}

const ownStudy = (em: EntityManager): Promise<Study> => em.findOneOrFail(StudySchema, currentStudyId());

async function changeLock(
  em: EntityManager,
  study: Study,
  kind: 'lock' | 'unlock',
  reason: string,
  points: StudyLock['openPoints'],
): Promise<StudyLock> {
  return act(
    em,
    {
      kind: kind === 'lock' ? 'study-locked' : 'study-unlocked',
      subject: { type: 'study', id: study.id },
      reason,
    },
    async (tx) => {
      // Waits for running acts, which hold the row for share; none begins before this commits (LK-04).
      await tx.execute('select id from study where id = ? for update', [study.id]);
      const row = await tx.findOneOrFail(StudySchema, study.id, { refresh: true });
      if (row.state !== (kind === 'lock' ? 'running' : 'locked'))
        throw stateForbids('Someone was quicker; look again.');
      row.state = kind === 'lock' ? 'locked' : 'running';
      return tx.create(StudyLockSchema, {
        studyId: study.id,
        kind,
        byId: currentPersonId(),
        at: new Date(),
        reason,
        openPoints: points,
      });
    },
  );
}
