import { defineEntity, p, type InferEntity } from '@mikro-orm/postgresql';
import type { Protocol } from '#schemas/protocol/protocol.ts';
import { id, json, revision } from '#backend/database/columns.ts';
import { audited } from '#backend/database/audited.ts';
import { PersonSchema } from '../accounts/person.entity.ts';
import { StudySchema } from '../studies/study.entity.ts';

/** The protocol being written; one a study. */
export const ProtocolDraftSchema = defineEntity({
  name: 'ProtocolDraft',
  tableName: 'protocol_draft',
  properties: {
    id: id(),
    studyId: () => p.manyToOne(StudySchema).mapToPk().fieldName('study_id').unique(),
    /** The protocol as its author wrote it, invalid text included, so that nothing typed is lost. */
    text: p.text(),
    baseVersion: p.integer().nullable(),
    revision: revision(),
  },
});
export type ProtocolDraft = InferEntity<typeof ProtocolDraftSchema>;
audited(ProtocolDraftSchema, {
  subject: 'protocol-draft',
  chain: 'study',
  columns: { text: 'digest', revision: 'skip' },
});

/** A published protocol: never changes (IV-01); *superseded* is derived from the next one. */
export const ProtocolVersionSchema = defineEntity({
  name: 'ProtocolVersion',
  tableName: 'protocol_version',
  uniques: [{ properties: ['studyId', 'version'] }],
  properties: {
    id: id(),
    studyId: () => p.manyToOne(StudySchema).mapToPk().fieldName('study_id'),
    version: p.integer(),
    content: json<Protocol>().columnType('json'),
    /** SHA-256 of the RFC 8785 form, hex. */
    hash: p.string().length(64),
    reason: p.text(),
    authorId: () => p.manyToOne(PersonSchema).mapToPk().fieldName('author_id'),
    publishedAt: p.datetime(),
  },
});
export type ProtocolVersion = InferEntity<typeof ProtocolVersionSchema>;
audited(ProtocolVersionSchema, {
  subject: 'protocol-version',
  chain: 'study',
  columns: { content: 'skip', reason: 'skip' },
});
