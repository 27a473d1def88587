import { defineEntity, p, type InferEntity } from '@mikro-orm/postgresql';
import { levels } from '#schemas/vocabulary/states.ts';
import { id, oneOf, revision } from '#backend/database/columns.ts';
import { audited } from '#backend/database/audited.ts';
import { PersonSchema } from '../accounts/person.entity.ts';
import { VisitSchema } from '../capture/visit.entity.ts';
import { ParticipantSchema } from '../participants/participant.entity.ts';
import { SiteSchema } from '../studies/site.entity.ts';
import { StudySchema } from '../studies/study.entity.ts';

/** A source file kept as it came: random key, SHA-256, never overwritten (SV-04). */
export const SourceDocumentSchema = defineEntity({
  name: 'SourceDocument',
  tableName: 'source_document',
  indexes: [{ properties: ['studyId', 'visitId'] }],
  properties: {
    id: id(),
    studyId: () => p.manyToOne(StudySchema).mapToPk().fieldName('study_id'),
    siteId: () => p.manyToOne(SiteSchema).mapToPk().fieldName('site_id'),
    participantId: () => p.manyToOne(ParticipantSchema).mapToPk().fieldName('participant_id'),
    visitId: () => p.manyToOne(VisitSchema).mapToPk().fieldName('visit_id'),
    /** What it shows, chosen from a list; the name the file had on someone's disk is not kept. */
    kind: p.string().length(40),
    mediaType: p.string().length(80),
    size: p.integer(),
    sha256: p.string().length(64),
    objectKey: p.string().length(80),
    level: oneOf(levels).default('open'),
    /** Whether it is the original or was compared with it, and by whom. */
    attestation: p.enum(['original', 'compared-with-original', 'uncertified-copy'] as const),
    uploadedById: () => p.manyToOne(PersonSchema).mapToPk().fieldName('uploaded_by_id'),
    uploadedAt: p.datetime(),
    /** Set when a newer file took its place; the file stays. */
    replacedById: p.uuid().nullable(),
    revision: revision(),
  },
});
export type SourceDocument = InferEntity<typeof SourceDocumentSchema>;
audited(SourceDocumentSchema, {
  subject: 'source-document',
  chain: 'study',
  columns: { objectKey: 'skip', revision: 'skip' },
});
