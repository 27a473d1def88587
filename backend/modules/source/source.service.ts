import type { EntityManager } from '@mikro-orm/postgresql';
import { createHash } from 'node:crypto';
import type { UploadSourceQuery } from '#schemas/api/source.ts';
import { sourceLimit } from '#schemas/vocabulary/source-kinds.ts';
import { act } from '#backend/database/act.ts';
import { currentPersonId, currentStudyId } from '#backend/http/actor.ts';
import { assertReadable, authorize } from '#backend/http/authorize.ts';
import { assertRevision } from '#backend/http/preconditions.ts';
import { Problem, stateForbids } from '#backend/http/problem.ts';
import { ObjectTooLarge, type ObjectStore } from '#backend/services/object-store.ts';
import { loadVisit } from '../capture/index.ts';
import { assertStudyOpen } from '../studies/index.ts';
import { acceptFile } from './accept-file.ts';
import { SourceDocumentSchema, type SourceDocument } from './source-document.entity.ts';

type Replaced = (tx: EntityManager, document: SourceDocument) => Promise<void>;
const listeners: Replaced[] = [];

/** Later modules hear, inside the act, that a document was replaced. */
export function onSourceReplaced(listener: Replaced): void {
  if (!listeners.includes(listener)) listeners.push(listener);
}

const aboutDocument = (document: SourceDocument) => ({
  type: 'source-document',
  id: document.id,
  participantId: document.participantId,
  siteId: document.siteId,
});

export async function loadSource(em: EntityManager, id: string): Promise<SourceDocument> {
  const document = await em.findOne(SourceDocumentSchema, { studyId: currentStudyId(), id });
  assertReadable('SourceDocument', document, 'This source document');
  return document as SourceDocument;
}

/** Takes a file in: streamed, hashed and typed on the way; the row is written after the object is safe. */
export async function uploadSource(
  em: EntityManager,
  objectStore: ObjectStore,
  visitId: string,
  { kind, attestation, level = 'open' }: UploadSourceQuery,
  source: AsyncIterable<Uint8Array>,
): Promise<SourceDocument> {
  const visit = await loadVisit(em, visitId);
  const { studyId, siteId, participantId } = visit;
  authorize('upload', 'SourceDocument', { studyId, siteId, participantId, level });
  if (visit.state === 'planned')
    throw stateForbids('Begin the visit first; then its source can be uploaded.');
  const file = acceptFile(source);
  const stored = await objectStore.put(file.body, { limit: sourceLimit }).catch((error: unknown) => {
    if (error instanceof ObjectTooLarge) {
      throw new Problem(413, 'too-large', `The file is larger than ${sourceLimit / 1024 ** 2} MB.`);
    }
    throw error;
  });
  return act(
    em,
    { kind: 'source-uploaded', subject: (row: SourceDocument) => aboutDocument(row) },
    async (tx) => {
      await assertStudyOpen(tx);
      return tx.create(SourceDocumentSchema, {
        studyId,
        siteId,
        participantId,
        visitId,
        kind,
        mediaType: file.type(),
        size: stored.size,
        sha256: stored.sha256,
        objectKey: stored.key,
        level,
        attestation,
        uploadedById: currentPersonId(),
        uploadedAt: new Date(),
      });
    },
  );
}

/** Puts a newer file in the place of an older one; the older stays, and every mark that stood on it falls. */
export async function replaceSource(
  em: EntityManager,
  newerId: string,
  { replaces, reason }: { replaces: string; reason: string },
  seen: number,
): Promise<SourceDocument> {
  const newer = await loadSource(em, newerId);
  const older = await loadSource(em, replaces);
  authorize('upload', 'SourceDocument', older);
  assertRevision(older, seen);
  if (older.replacedById != null) throw stateForbids('This file was replaced already.');
  if (older.visitId !== newer.visitId || older.id === newer.id) {
    throw stateForbids('A file is replaced by another one of the same visit.');
  }
  return act(em, { kind: 'source-replaced', subject: aboutDocument(older), reason }, async (tx) => {
    await assertStudyOpen(tx);
    const row = await tx.findOneOrFail(SourceDocumentSchema, older.id);
    row.replacedById = newer.id;
    for (const listener of listeners) await listener(tx, row);
    return row;
  });
}

/** The bytes of a document, whole, checked against the hash it came in with (SV-04). */
export async function readSource(objectStore: ObjectStore, document: SourceDocument): Promise<Buffer> {
  const chunks: Uint8Array[] = [];
  const hash = createHash('sha256');
  for await (const chunk of (await objectStore.get(document.objectKey)) as AsyncIterable<Uint8Array>) {
    hash.update(chunk);
    chunks.push(chunk);
  }
  if (hash.digest('hex') !== document.sha256) {
    throw new Problem(
      409,
      'integrity-broken',
      'The stored file no longer matches its hash; it is not shown. Tell the administrator.',
    );
  }
  return Buffer.concat(chunks);
}
