import { IsolationLevel, type EntityManager } from '@mikro-orm/postgresql';
import { randomUUID } from 'node:crypto';
import { act } from '#backend/database/act.ts';
import { currentPersonId, currentStudyId, runAs } from '#backend/http/actor.ts';
import { authorize } from '#backend/http/authorize.ts';
import { stateForbids } from '#backend/http/problem.ts';
import type { JobHandler } from '#backend/jobs/queue.ts';
import { openProgress } from '#backend/jobs/progress.ts';
import { sendJob } from '#backend/jobs/send.ts';
import type { ObjectStore } from '#backend/services/object-store.ts';
import { StudySchema } from '../studies/study.entity.ts';
import { CutSchema, type Cut } from './analysis.entity.ts';
import { cutLines, type Report } from './build-cut.ts';
import { systemActor } from './system-actor.ts';

/** No cut is larger; a study of 100,000 participants stays well below. */
const sizeLimit = 4 * 1024 ** 3;

/** Asks for a cut; a worker makes it. A final one shows conditions, so it waits for unblinding. */
export async function requestCut(em: EntityManager, kind: Cut['kind']): Promise<string> {
  const studyId = currentStudyId();
  authorize('request', 'Cut', { studyId });
  const study = await em.findOneOrFail(StudySchema, studyId);
  if (kind === 'final' && study.state !== 'unblinded') {
    throw stateForbids(
      'A final cut shows the conditions: lock the study and unblind it first, or ask for a rehearsal cut.',
    );
  }
  if (study.state === 'setting-up') throw stateForbids('The study has no data yet.');
  const jobKey = randomUUID();
  await act(
    em,
    { kind: 'cut-requested', subject: { type: 'study', id: studyId }, reason: `${kind} cut` },
    async (tx) => {
      await openProgress(tx, jobKey);
      await sendJob(tx, 'cut.build', { studyId, kind, personId: currentPersonId(), jobKey });
    },
  );
  return jobKey;
}

/**
 * Makes the cut: one REPEATABLE READ read-only transaction streamed to the object store under a random key,
 * then a short act that inserts the cut with its hash. It restarts after a crash; the orphan is swept.
 */
export function cutJob(fork: () => EntityManager, objectStore: ObjectStore): JobHandler<'cut.build'> {
  return ({ data, report }) =>
    runAs(systemActor(data.studyId), async () => {
      const { studyId, kind, personId } = data;
      const stored = await fork().transactional(
        (tx) =>
          objectStore.put(chunks(tx, { studyId, kind }, report), {
            limit: sizeLimit,
            contentType: 'application/jsonl',
          }),
        { isolationLevel: IsolationLevel.REPEATABLE_READ, readOnly: true },
      );
      await act(
        fork(),
        { kind: 'cut-made', subject: (row: Cut) => ({ type: 'cut', id: row.id }) },
        async (tx) => {
          const study = await tx.findOneOrFail(StudySchema, studyId);
          const [head] = await tx.execute<{ sequence: string; hash: string }[]>(
            `select sequence, encode(hash, 'hex') as hash from audit_event where study_id = ? order by sequence desc limit 1`,
            [studyId],
          );
          await tx.execute('select pg_advisory_xact_lock(hashtextextended(?, 1))', [studyId]);
          return tx.create(CutSchema, {
            studyId,
            number: (await tx.count(CutSchema, { studyId })) + 1,
            kind,
            studyStateThen: study.state,
            objectKey: stored.key,
            sha256: stored.sha256,
            manifest: {
              bytes: stored.size,
              chainHead: { sequence: Number(head?.sequence), hash: head?.hash },
            },
            madeById: personId,
            madeAt: new Date(),
          });
        },
      );
    });
}

/** Lines gathered to 64 kB: rows sent one by one are twenty times slower. */
async function* chunks(
  tx: EntityManager,
  request: { studyId: string; kind: Cut['kind'] },
  report: Report,
): AsyncGenerator<Uint8Array> {
  let buffer = '';
  for await (const line of cutLines(tx, request, report)) {
    buffer += line;
    if (buffer.length < 65_536) continue;
    yield Buffer.from(buffer);
    buffer = '';
  }
  if (buffer !== '') yield Buffer.from(buffer);
}
