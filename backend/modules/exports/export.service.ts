import type { EntityManager } from '@mikro-orm/postgresql';
import type { StudyResult } from '#analysis/study/run-study.ts';
import type { StudyPlan } from '#analysis/study/study-plan.ts';
import type { DecideExportBody, RequestExportBody } from '#schemas/api/exports.ts';
import { act } from '#backend/database/act.ts';
import { canonicalHash } from '#backend/database/trail/canonical.ts';
import { currentPersonId, currentStudyId, runAs } from '#backend/http/actor.ts';
import { assertReadable, authorize } from '#backend/http/authorize.ts';
import { assertRevision } from '#backend/http/preconditions.ts';
import { Problem, stateForbids } from '#backend/http/problem.ts';
import { productVersion } from '#backend/database/version.ts';
import type { JobHandler } from '#backend/jobs/queue.ts';
import { openProgress } from '#backend/jobs/progress.ts';
import { sendJob } from '#backend/jobs/send.ts';
import type { ObjectStore } from '#backend/services/object-store.ts';
import { confirmPassword } from '../accounts/index.ts';
import { readCut, readResult, systemActor, verifiedBytes } from '../analysis/index.ts';
import { CutSchema, PlanVersionSchema, RunSchema, type Cut, type Run } from '../analysis/analysis.entity.ts';
import { collect, type Collected } from './bundle/collect.ts';
import { disclosureReport } from './bundle/disclosure.ts';
import { bundleFiles } from './bundle/files.ts';
import { zipped } from './bundle/zip.ts';
import { ExportRequestSchema, type ExportRequest } from './export-request.entity.ts';

/** Once built, a file waits this long for its one download. */
export const keptFor = 72 * 3_600_000;
const sizeLimit = 2 * 1024 ** 3;

const aboutExport = (row: ExportRequest) => ({ type: 'export-request', id: row.id });

export async function loadExport(em: EntityManager, id: string): Promise<ExportRequest> {
  const row = await em.findOne(ExportRequestSchema, { studyId: currentStudyId(), id });
  assertReadable('ExportRequest', row, 'This export');
  return row as ExportRequest;
}

async function collectRun(
  em: EntityManager,
  objectStore: ObjectStore,
  run: Run,
): Promise<{ cut: Cut; collected: Collected }> {
  const cut = await em.findOneOrFail(CutSchema, run.cutId);
  const lines = readCut(verifiedBytes(await objectStore.get(cut.objectKey), cut.sha256));
  return { cut, collected: await collect(em, run.studyId, lines) };
}

/** Asks for an export of a finished run with a purpose; the disclosure report is made at once, from the same cut. */
export async function requestExport(
  em: EntityManager,
  objectStore: ObjectStore,
  { runId, purpose }: RequestExportBody,
): Promise<ExportRequest> {
  const studyId = currentStudyId();
  authorize('request', 'ExportRequest', { studyId });
  const found = await em.findOne(RunSchema, { studyId, id: runId });
  assertReadable('Run', found, 'This run');
  const run = found as Run;
  if (run.state !== 'done') throw stateForbids('Only a finished run is exported.');
  const { cut, collected } = await collectRun(em, objectStore, run);
  if (cut.kind !== 'final')
    throw stateForbids('A rehearsal is not exported: its labels are flipped and its values permuted.');
  const report = disclosureReport(collected, { cutSha256: cut.sha256, runNumber: run.number });
  return act(em, { kind: 'export-requested', subject: aboutExport, reason: purpose }, async (tx) => {
    await tx.execute('select pg_advisory_xact_lock(hashtextextended(?, 3))', [studyId]);
    return tx.create(ExportRequestSchema, {
      studyId,
      number: (await tx.count(ExportRequestSchema, { studyId })) + 1,
      purpose,
      runId,
      requestedById: currentPersonId(),
      requestedAt: new Date(),
      report: { ...report },
      reportHash: canonicalHash({ report, runId, result: run.resultSha256 }),
    });
  });
}

/** Approves or refuses with the password, after reading exactly this report; never one's own request (DX-13). */
export async function decideExport(
  em: EntityManager,
  id: string,
  seen: number,
  { decision, reason, password, reportHash }: DecideExportBody,
): Promise<ExportRequest> {
  const row = await loadExport(em, id);
  assertRevision(row, seen);
  authorize(
    'decide',
    'ExportRequest',
    row,
    'Someone else than the requester decides: the principal investigator.',
  );
  if (row.state !== 'requested') throw stateForbids('This request has been decided already.');
  if (row.reportHash !== reportHash) {
    throw new Problem(
      412,
      'stale-revision',
      'The disclosure report is not the one you read; look at it again.',
    );
  }
  await confirmPassword(em, currentPersonId(), password);
  return act(
    em,
    {
      kind: decision === 'approve' ? 'export-approved' : 'export-refused',
      subject: { type: 'export-request', id },
      reason,
    },
    async (tx) => {
      const request = await tx.findOneOrFail(ExportRequestSchema, id);
      assertRevision(request, seen);
      request.state = decision === 'approve' ? 'approved' : 'refused';
      request.decidedById = currentPersonId();
      request.decidedAt = new Date();
      request.decisionReason = reason;
      if (decision === 'approve') {
        await openProgress(tx, id);
        await sendJob(tx, 'export.build', { studyId: request.studyId, exportId: id, jobKey: id });
      }
      return request;
    },
  );
}

/** Builds an approved export; a second try after a killed worker makes it anew. */
export function exportJob(fork: () => EntityManager, objectStore: ObjectStore): JobHandler<'export.build'> {
  return ({ data: { studyId, exportId }, report }) =>
    runAs(systemActor(studyId), async () => {
      const em = fork();
      const request = await em.findOneOrFail(ExportRequestSchema, { studyId, id: exportId });
      if (request.state !== 'approved') return;
      const run = await em.findOneOrFail(RunSchema, request.runId);
      await report(0, 4, 'reading the cut');
      const { cut, collected } = await collectRun(em, objectStore, run);
      const approved = disclosureReport(collected, { cutSha256: cut.sha256, runNumber: run.number });
      if (
        canonicalHash({ report: approved, runId: run.id, result: run.resultSha256 }) !== request.reportHash
      ) {
        throw new Error('What would leave is no longer what was approved.');
      }
      await report(1, 4, 'reading the result');
      const result = JSON.parse(await readResult(objectStore, run)) as StudyResult;
      const plan = await planOf(em, run);
      await report(2, 4, 'writing the files');
      const files = bundleFiles(collected, plan, result, {
        exportNumber: request.number,
        method: approved.method,
        reportHash: request.reportHash,
        cut: { number: cut.number, sha256: cut.sha256 },
        chainHead: cut.manifest['chainHead'] as { sequence: number; hash: string },
        run: {
          number: run.number,
          planHash: run.planHash,
          resultSha256: run.resultSha256 ?? '',
          engineVersion: run.engineVersion,
          seed: run.seed,
        },
        productVersion,
      });
      const stored = await objectStore.put(zipped(files), {
        limit: sizeLimit,
        contentType: 'application/zip',
      });
      await report(3, 4, 'sealing');
      await act(
        fork(),
        { kind: 'export-built', subject: { type: 'export-request', id: exportId } },
        async (tx) => {
          const row = await tx.findOneOrFail(ExportRequestSchema, exportId);
          row.state = 'ready';
          row.objectKey = stored.key;
          row.sha256 = stored.sha256;
          row.size = stored.size;
          row.readyAt = new Date();
        },
      );
      await report(4, 4);
    });
}

async function planOf(em: EntityManager, run: Run): Promise<StudyPlan> {
  return (await em.findOneOrFail(PlanVersionSchema, run.planVersionId ?? '')).content;
}

/** Gives the file out: to its requester, once, while it is fresh (DX-14). */
export async function takeExport(em: EntityManager, id: string): Promise<ExportRequest> {
  const row = await loadExport(em, id);
  authorize('download', 'ExportRequest', row, 'Only the requester downloads an export.');
  return act(em, { kind: 'export-downloaded', subject: { type: 'export-request', id } }, async (tx) => {
    // The row is held: of two parallel downloads one succeeds.
    await tx.execute('select id from export_request where id = ? for update', [id]);
    const request = await tx.findOneOrFail(ExportRequestSchema, id, { refresh: true });
    if (request.state === 'downloaded')
      throw stateForbids('This export was downloaded already; request a new one.');
    if (request.state !== 'ready') throw stateForbids('This export is not ready for download.');
    if (Date.now() - (request.readyAt?.getTime() ?? 0) > keptFor) {
      throw stateForbids('The time for downloading this export has passed; request a new one.');
    }
    request.state = 'downloaded';
    request.downloadedAt = new Date();
    return request;
  });
}
