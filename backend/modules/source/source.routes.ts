import type { EntityManager } from '@mikro-orm/postgresql';
import {
  replaceSourceBody,
  uploadSourceQuery,
  type ReplaceSourceBody,
  type SourceDocumentDto,
  type UploadSourceQuery,
} from '#schemas/api/source.ts';
import type { SourceKind, SourceType } from '#schemas/vocabulary/source-kinds.ts';
import { accessible } from '#backend/database/row-filter.ts';
import type { Deps } from '#backend/http/deps.ts';
import { etag, ifMatch } from '#backend/http/preconditions.ts';
import { idParameter, type RouteTable } from '#backend/http/route.ts';
import { PersonSchema } from '../accounts/person.entity.ts';
import { loadVisit } from '../capture/index.ts';
import { SourceDocumentSchema, type SourceDocument } from './source-document.entity.ts';
import { loadSource, readSource, replaceSource, uploadSource } from './source.service.ts';

const study = '/studies/:studyCode';
const anyObject = { type: 'object' } as const;

async function present(
  em: EntityManager,
  documents: readonly SourceDocument[],
): Promise<SourceDocumentDto[]> {
  const people = await em.find(PersonSchema, {
    id: { $in: documents.map(({ uploadedById }) => uploadedById) },
  });
  const names = new Map(people.map(({ id, name }) => [id, name]));
  return documents.map((row) => ({
    id: row.id,
    visitId: row.visitId,
    kind: row.kind as SourceKind,
    mediaType: row.mediaType as SourceType,
    size: row.size,
    sha256: row.sha256,
    level: row.level,
    attestation: row.attestation,
    uploadedBy: names.get(row.uploadedById) ?? '',
    uploadedAt: row.uploadedAt.toISOString(),
    replacedById: row.replacedById ?? null,
    revision: row.revision,
  }));
}

/** Source documents: uploaded as the bare bytes of one file, shown through our own server only. */
export function declareSourceRoutes({ route }: RouteTable, { orm: { em }, objectStore }: Deps): void {
  route({
    method: 'get',
    path: `${study}/visits/:visitId/source-documents`,
    summary: 'The source documents of a visit, replaced ones included',
    gate: ['read', 'SourceDocument'],
    responds: { status: 200, body: { type: 'array', items: anyObject } },
    acts: null,
    handler: async (request, response) => {
      const visit = await loadVisit(em, idParameter(request, 'visitId'));
      const allowed = accessible('read', 'SourceDocument');
      const rows =
        allowed === null
          ? []
          : await em.find(
              SourceDocumentSchema,
              { $and: [allowed, { visitId: visit.id }] },
              { orderBy: { uploadedAt: 'asc' } },
            );
      response.json(await present(em, rows));
    },
  });

  route({
    method: 'post',
    path: `${study}/visits/:visitId/source-documents`,
    summary: 'Upload a source document: the body is the file itself',
    gate: ['upload', 'SourceDocument'],
    bodyType: 'upload',
    query: uploadSourceQuery,
    responds: { status: 201, body: anyObject },
    acts: ['source-uploaded'],
    handler: async (request, response) => {
      const query = request.query as unknown as UploadSourceQuery;
      const document = await uploadSource(em, objectStore, idParameter(request, 'visitId'), query, request);
      response
        .status(201)
        .set('ETag', etag(document.revision))
        .json((await present(em.fork(), [document]))[0]);
    },
  });

  route({
    method: 'post',
    path: `${study}/source-documents/:documentId/replacing`,
    summary: 'Put this document in the place of an older one',
    gate: ['upload', 'SourceDocument'],
    body: replaceSourceBody,
    responds: { status: 200, body: anyObject },
    acts: ['source-replaced'],
    handler: async (request, response) => {
      const body = request.body as ReplaceSourceBody;
      const older = await replaceSource(em, idParameter(request, 'documentId'), body, ifMatch(request));
      response.set('ETag', etag(older.revision)).json((await present(em.fork(), [older]))[0]);
    },
  });

  route({
    method: 'get',
    path: `${study}/source-documents/:documentId/content`,
    summary: 'The file, checked against its hash',
    gate: ['read', 'SourceDocument'],
    responds: { status: 200, body: null },
    acts: null,
    handler: async (request, response) => {
      const document = await loadSource(em, idParameter(request, 'documentId'));
      const bytes = await readSource(objectStore, document);
      response
        .set({
          'Content-Type': document.mediaType,
          'Content-Disposition': 'attachment; filename="source"',
          'Content-Security-Policy': "default-src 'none'; sandbox",
          'X-Content-Type-Options': 'nosniff',
        })
        .send(bytes);
    },
  });
}
