import type { EntityManager } from '@mikro-orm/postgresql';
import { pipeline } from 'node:stream/promises';
import {
  decideExportBody,
  requestExportBody,
  type DecideExportBody,
  type DisclosureReport,
  type ExportDto,
  type RequestExportBody,
} from '#schemas/api/exports.ts';
import { emptyBody } from '#schemas/api/capture.ts';
import { currentActor, currentStudyId } from '#backend/http/actor.ts';
import type { Deps } from '#backend/http/deps.ts';
import { etag, ifMatch } from '#backend/http/preconditions.ts';
import { idParameter, type RouteTable } from '#backend/http/route.ts';
import { PersonSchema } from '../accounts/person.entity.ts';
import { presentProgress } from '../analysis/index.ts';
import { ExportRequestSchema, type ExportRequest } from './export-request.entity.ts';
import { decideExport, keptFor, loadExport, requestExport, takeExport } from './export.service.ts';

const study = '/studies/:studyCode';
const anyObject = { type: 'object' } as const;

async function present(em: EntityManager, rows: readonly ExportRequest[]): Promise<ExportDto[]> {
  const ids = rows.flatMap(({ requestedById, decidedById }) => [
    requestedById,
    ...(decidedById ? [decidedById] : []),
  ]);
  const names = new Map(
    (await em.find(PersonSchema, { id: { $in: ids } })).map(({ id, name }) => [id, name]),
  );
  return Promise.all(
    rows.map(async (row) => ({
      id: row.id,
      number: row.number,
      state: row.state,
      revision: row.revision,
      purpose: row.purpose,
      runId: row.runId,
      requestedBy: names.get(row.requestedById) ?? '',
      requestedAt: row.requestedAt.toISOString(),
      mine: row.requestedById === currentActor().personId,
      report: row.report as unknown as DisclosureReport,
      reportHash: row.reportHash,
      decidedBy: names.get(row.decidedById ?? '') ?? null,
      decidedAt: row.decidedAt?.toISOString() ?? null,
      decisionReason: row.decisionReason ?? null,
      sha256: row.sha256 ?? null,
      size: row.size ?? null,
      readyAt: row.readyAt?.toISOString() ?? null,
      expiresAt: row.readyAt ? new Date(row.readyAt.getTime() + keptFor).toISOString() : null,
      downloadedAt: row.downloadedAt?.toISOString() ?? null,
      progress: row.state === 'approved' ? await presentProgress(em, row.id) : null,
    })),
  );
}

/** Exports: requested, read and decided, built, downloaded once; the register of what left. */
export function declareExportRoutes({ route }: RouteTable, { orm: { em }, objectStore }: Deps): void {
  route({
    method: 'get',
    path: `${study}/exports`,
    summary: 'The export register',
    gate: ['read', 'ExportRequest'],
    responds: { status: 200, body: { type: 'array', items: anyObject } },
    acts: null,
    handler: async (_request, response) => {
      const rows = await em.find(
        ExportRequestSchema,
        { studyId: currentStudyId() },
        { orderBy: { number: 'desc' } },
      );
      response.json(await present(em, rows));
    },
  });

  route({
    method: 'post',
    path: `${study}/exports`,
    summary: 'Request an export of a run, with its purpose',
    gate: ['request', 'ExportRequest'],
    body: requestExportBody,
    responds: { status: 201, body: anyObject },
    acts: ['export-requested'],
    handler: async (request, response) => {
      const row = await requestExport(em, objectStore, request.body as RequestExportBody);
      response
        .status(201)
        .set('ETag', etag(row.revision))
        .json((await present(em.fork(), [row]))[0]);
    },
  });

  route({
    method: 'get',
    path: `${study}/exports/:exportId`,
    summary: 'One export with its disclosure report',
    gate: ['read', 'ExportRequest'],
    responds: { status: 200, body: anyObject },
    acts: null,
    handler: async (request, response) => {
      const row = await loadExport(em, idParameter(request, 'exportId'));
      response.set('ETag', etag(row.revision)).json((await present(em, [row]))[0]);
    },
  });

  route({
    method: 'post',
    path: `${study}/exports/:exportId/decision`,
    summary: 'Approve or refuse an export with the password',
    gate: ['decide', 'ExportRequest'],
    body: decideExportBody,
    responds: { status: 200, body: anyObject },
    acts: ['export-approved', 'export-refused', 'signature-refused'],
    handler: async (request, response) => {
      const body = request.body as DecideExportBody;
      const row = await decideExport(em, idParameter(request, 'exportId'), ifMatch(request), body);
      response.set('ETag', etag(row.revision)).json((await present(em.fork(), [row]))[0]);
    },
  });

  route({
    method: 'post',
    path: `${study}/exports/:exportId/download`,
    summary: 'Download an export, once',
    gate: ['download', 'ExportRequest'],
    body: emptyBody,
    responds: { status: 200, body: null },
    acts: ['export-downloaded'],
    handler: async (request, response) => {
      const row = await loadExport(em, idParameter(request, 'exportId'));
      const bytes = row.objectKey == null ? null : await objectStore.get(row.objectKey);
      const taken = await takeExport(em, row.id);
      response.set({
        'Content-Type': 'application/zip',
        'Content-Length': String(taken.size),
        'Content-Disposition': `attachment; filename="export-${taken.number}.zip"`,
        'Content-Security-Policy': "default-src 'none'; sandbox",
      });
      if (bytes !== null) await pipeline(bytes, response);
    },
  });
}
