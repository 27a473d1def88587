import type { EntityManager } from '@mikro-orm/postgresql';
import { fileURLToPath } from 'node:url';
import { Piscina } from 'piscina';
import { engineVersion, type StudyResult } from '#analysis/study/run-study.ts';
import type { StudyPlan } from '#analysis/study/study-plan.ts';
import type { RequestRunBody } from '#schemas/api/analysis.ts';
import { act } from '#backend/database/act.ts';
import { canonicalForm, canonicalHash, sha256 } from '#backend/database/trail/canonical.ts';
import { currentPersonId, currentStudyId, runAs } from '#backend/http/actor.ts';
import { assertReadable, authorize } from '#backend/http/authorize.ts';
import { notFound, Problem, stateForbids } from '#backend/http/problem.ts';
import type { JobHandler } from '#backend/jobs/queue.ts';
import { openProgress } from '#backend/jobs/progress.ts';
import { sendJob } from '#backend/jobs/send.ts';
import type { ObjectStore } from '#backend/services/object-store.ts';
import { CutSchema, PlanVersionSchema, RunSchema, type Cut, type Run } from './analysis.entity.ts';
import { readCut } from './cut-file.ts';
import { loadPlanDraft, planProblems } from './plan.service.ts';
import { studyDataOf } from './study-data.ts';
import { systemActor } from './system-actor.ts';
import { verifiedBytes } from './verified-bytes.ts';

const resultLimit = 64 * 1024 ** 2;

/** Asks for a run of a signed plan, or of a draft on a rehearsal cut; a worker carries it out. */
export async function requestRun(em: EntityManager, body: RequestRunBody): Promise<Run> {
  const studyId = currentStudyId();
  const cut = await em.findOne(CutSchema, { studyId, id: body.cutId });
  assertReadable('Cut', cut, 'This cut');
  const plan = await planOf(em, body, cut as Cut);
  return act(
    em,
    { kind: 'run-requested', subject: (row: Run) => ({ type: 'run', id: row.id }) },
    async (tx) => {
      await tx.execute('select pg_advisory_xact_lock(hashtextextended(?, 2))', [studyId]);
      const run = tx.create(RunSchema, {
        studyId,
        number: (await tx.count(RunSchema, { studyId })) + 1,
        ...plan,
        cutId: body.cutId,
        engineVersion,
        requestedById: currentPersonId(),
        requestedAt: new Date(),
      });
      await tx.flush();
      await openProgress(tx, run.id);
      await sendJob(tx, 'run.execute', { studyId, runId: run.id, jobKey: run.id });
      return run;
    },
  );
}

async function planOf(em: EntityManager, body: RequestRunBody, cut: Cut) {
  const studyId = currentStudyId();
  if (body.planVersionId !== undefined) {
    const version = await em.findOne(PlanVersionSchema, { studyId, id: body.planVersionId });
    assertReadable('PlanVersion', version, 'This plan');
    const found = version as NonNullable<typeof version>;
    authorize('run', 'PlanVersion', found);
    return { planVersionId: found.id, planHash: found.hash, seed: found.content.seed };
  }
  if (cut.kind === 'final') throw stateForbids('A final cut is run by a signed plan; sign it first.');
  const draft = await loadPlanDraft(em, body.planDraftId ?? '');
  authorize('run', 'PlanDraft', draft);
  const problems = planProblems(draft.content);
  if (problems.length > 0) {
    const errors = problems.map(({ pointer, message }) => ({ pointer, detail: message }));
    throw new Problem(
      422,
      'plan-not-valid',
      'The plan is not complete yet; each point is named below.',
      errors,
    );
  }
  return { planDraftId: draft.id, planHash: canonicalHash(draft.content), seed: draft.content.seed };
}

/** Works in threads of its own, so that the server answers others meanwhile. */
const engine = new Piscina({
  filename: fileURLToPath(new URL('./engine.worker.ts', import.meta.url)),
  // A test runner does not run under tsx; the server does, and naming it twice does no harm.
  execArgv: ['--import', 'tsx'],
  minThreads: 0,
  maxThreads: 2,
  idleTimeout: 30_000,
});

/** Carries a run out: the same plan, cut, engine version and seed give the same bytes. */
export function runJob(fork: () => EntityManager, objectStore: ObjectStore): JobHandler<'run.execute'> {
  return ({ data: { studyId, runId }, signal, report }) =>
    runAs(systemActor(studyId), async () => {
      const em = fork();
      const run = await em.findOneOrFail(RunSchema, { studyId, id: runId });
      if (run.state === 'done') return;
      const cut = await em.findOneOrFail(CutSchema, run.cutId);
      const plan = await contentOf(em, run);
      await report(0, 3, 'reading the cut');
      const { data } = await studyDataOf(
        readCut(verifiedBytes(await objectStore.get(cut.objectKey), cut.sha256)),
      );
      await report(1, 3, 'computing');
      const answer = (await engine.run({ plan, data }, { signal })) as
        { result: StudyResult } | { refused: string };
      await report(2, 3, 'storing the result');
      const outcome =
        'result' in answer ? await storeResult(objectStore, answer.result) : { failure: answer.refused };
      await act(fork(), { kind: 'run-finished', subject: { type: 'run', id: runId } }, async (tx) => {
        const row = await tx.findOneOrFail(RunSchema, { studyId, id: runId });
        row.state = 'failure' in outcome ? 'failed' : 'done';
        Object.assign(row, outcome);
      });
      await report(3, 3);
    });
}

async function contentOf(em: EntityManager, run: Run): Promise<StudyPlan> {
  if (run.planVersionId != null)
    return (await em.findOneOrFail(PlanVersionSchema, run.planVersionId)).content;
  const draft = await em
    .getConnection()
    .execute<{ content: StudyPlan }[]>('select content from plan_draft where id = ?', [run.planDraftId]);
  const content = draft[0]?.content;
  if (content === undefined || canonicalHash(content) !== run.planHash) {
    throw new Error('The draft has changed since the run was asked for.');
  }
  return content;
}

async function storeResult(objectStore: ObjectStore, result: StudyResult) {
  const bytes = Buffer.from(canonicalForm(result));
  const body = (async function* () {
    yield bytes;
  })();
  const { key } = await objectStore.put(body, { limit: resultLimit, contentType: 'application/json' });
  return { resultKey: key, resultSha256: sha256(bytes) };
}

/** The stored result of a finished run, its bytes checked against the hash on record. */
export async function readResult(objectStore: ObjectStore, run: Run): Promise<string> {
  if (run.state !== 'done' || run.resultKey == null || run.resultSha256 == null)
    throw notFound('A result of this run');
  const chunks: Uint8Array[] = [];
  try {
    for await (const chunk of verifiedBytes(await objectStore.get(run.resultKey), run.resultSha256))
      chunks.push(chunk);
  } catch {
    throw new Problem(409, 'integrity-broken', 'The stored result no longer matches its hash; run it again.');
  }
  return Buffer.concat(chunks).toString('utf8');
}
