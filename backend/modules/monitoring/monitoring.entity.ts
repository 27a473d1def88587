import { defineEntity, p, type InferEntity } from '@mikro-orm/postgresql';
import { levels, queryStates } from '#schemas/vocabulary/states.ts';
import { id, oneOf, revision } from '#backend/database/columns.ts';
import { audited } from '#backend/database/audited.ts';
import { PersonSchema } from '../accounts/person.entity.ts';
import { VisitSchema } from '../capture/visit.entity.ts';
import { ParticipantSchema } from '../participants/participant.entity.ts';
import { SourceDocumentSchema } from '../source/source-document.entity.ts';
import { SiteSchema } from '../studies/site.entity.ts';
import { StudySchema } from '../studies/study.entity.ts';

/** "This recorded value agrees with this source": holds while both are the present ones (SV-02). */
export const VerificationMarkSchema = defineEntity({
  name: 'VerificationMark',
  tableName: 'verification_mark',
  indexes: [{ properties: ['studyId', 'visitId'] }, { properties: ['studyId', 'entryId', 'address'] }],
  properties: {
    id: id(),
    studyId: () => p.manyToOne(StudySchema).mapToPk().fieldName('study_id'),
    siteId: () => p.manyToOne(SiteSchema).mapToPk().fieldName('site_id'),
    visitId: () => p.manyToOne(VisitSchema).mapToPk().fieldName('visit_id').nullable(),
    entryId: p.uuid(),
    entryRevision: p.integer(),
    address: p.string().length(200),
    valueId: p.uuid(),
    sourceDocumentId: () => p.manyToOne(SourceDocumentSchema).mapToPk().fieldName('source_document_id'),
    sourceSha256: p.string().length(64),
    setById: () => p.manyToOne(PersonSchema).mapToPk().fieldName('set_by_id'),
    setAt: p.datetime(),
    /** Set when the value or the source changed, or the monitor took it back; it never stands again. */
    fallenAt: p.datetime().nullable(),
    fallenBecause: p.enum(['value-changed', 'source-replaced', 'cleared', 'voided'] as const).nullable(),
    revision: revision(),
  },
});
export type VerificationMark = InferEntity<typeof VerificationMarkSchema>;
audited(VerificationMarkSchema, {
  subject: 'verification-mark',
  chain: 'study',
  columns: { revision: 'skip' },
});

/** A question on a field, an entry, a visit or a participant: asked → replied → settled. */
export const QuerySchema = defineEntity({
  name: 'Query',
  tableName: 'query',
  indexes: [{ properties: ['studyId', 'state'] }, { properties: ['studyId', 'visitId'] }],
  properties: {
    id: id(),
    studyId: () => p.manyToOne(StudySchema).mapToPk().fieldName('study_id'),
    siteId: () => p.manyToOne(SiteSchema).mapToPk().fieldName('site_id'),
    participantId: () => p.manyToOne(ParticipantSchema).mapToPk().fieldName('participant_id'),
    visitId: () => p.manyToOne(VisitSchema).mapToPk().fieldName('visit_id').nullable(),
    entryId: p.uuid().nullable(),
    address: p.string().length(200).nullable(),
    /** Whose step it is about: decides who answers. */
    performedBy: p.enum(['coordinator', 'unblinded-technician', 'study-physician'] as const),
    level: oneOf(levels).default('open'),
    state: oneOf(queryStates).default('asked'),
    /** The edit check that opened it; null when a person did. */
    checkId: p.string().length(80).nullable(),
    openedById: () => p.manyToOne(PersonSchema).mapToPk().fieldName('opened_by_id'),
    openedAt: p.datetime(),
    revision: revision(),
  },
});
export type Query = InferEntity<typeof QuerySchema>;
audited(QuerySchema, { subject: 'query', chain: 'study', columns: { revision: 'skip' } });

/** One message of a query's thread; append-only. */
export const QueryMessageSchema = defineEntity({
  name: 'QueryMessage',
  tableName: 'query_message',
  indexes: [{ properties: ['studyId', 'queryId'] }],
  properties: {
    id: id(),
    studyId: () => p.manyToOne(StudySchema).mapToPk().fieldName('study_id'),
    queryId: () => p.manyToOne(QuerySchema).mapToPk().fieldName('query_id'),
    authorId: () => p.manyToOne(PersonSchema).mapToPk().fieldName('author_id'),
    kind: p.enum(['asked', 'replied', 'settled', 'reopened'] as const),
    text: p.text(),
    at: p.datetime(),
  },
});
export type QueryMessage = InferEntity<typeof QueryMessageSchema>;
audited(QueryMessageSchema, { subject: 'query-message', chain: 'study', columns: {} });
