import { defineEntity, p, type InferEntity } from '@mikro-orm/postgresql';
import { entryStates } from '#schemas/vocabulary/states.ts';
import { id, json, oneOf, revision } from '#backend/database/columns.ts';
import { audited } from '#backend/database/audited.ts';
import { InstrumentVersionSchema } from '../instruments/instrument.entity.ts';
import { ParticipantSchema } from '../participants/participant.entity.ts';
import { SiteSchema } from '../studies/site.entity.ts';
import { StudySchema } from '../studies/study.entity.ts';
import { VisitSchema } from './visit.entity.ts';

/** What lies at one address now: the recorded value's id and its commitment (hex). */
export interface ContentItem {
  value: string;
  commitment: string;
}

/** One instrument version filled in once: at a step of a visit, or in a participant's own log. */
export const EntrySchema = defineEntity({
  name: 'Entry',
  tableName: 'entry',
  indexes: [{ properties: ['studyId', 'visitId'] }, { properties: ['studyId', 'participantId'] }],
  properties: {
    studyId: () => p.manyToOne(StudySchema).mapToPk().fieldName('study_id').primary(),
    id: id(),
    siteId: () => p.manyToOne(SiteSchema).mapToPk().fieldName('site_id'),
    participantId: () => p.manyToOne(ParticipantSchema).mapToPk().fieldName('participant_id'),
    /** Null in a participant's own log (medication, adverse events). */
    visitId: () => p.manyToOne(VisitSchema).mapToPk().fieldName('visit_id').nullable(),
    stepKey: p.string().length(60).nullable(),
    instrumentVersionId: () =>
      p.manyToOne(InstrumentVersionSchema).mapToPk().fieldName('instrument_version_id'),
    instrumentKey: p.string().length(60),
    /** Who does the step by the protocol: decides who may write. */
    performedBy: p.enum(['coordinator', 'unblinded-technician', 'study-physician'] as const),
    state: oneOf(entryStates).default('open'),
    completedAt: p.datetime().nullable(),
    /** Address → recorded value. Values themselves lie in `recorded_value`, once. */
    content: json<Record<string, ContentItem>>(),
    /** SHA-256 over the sorted commitments, hex: what signatures, marks and cuts bind to. */
    contentHash: p.string().length(64),
    revision: revision(),
  },
});
export type Entry = InferEntity<typeof EntrySchema>;
audited(EntrySchema, {
  subject: 'entry',
  chain: 'study',
  columns: { content: 'skip', contentHash: 'skip', revision: 'skip' },
});

/** What an edit check said of a value that was submitted, and what followed (AT-09). */
export const CheckOutcomeSchema = defineEntity({
  name: 'CheckOutcome',
  tableName: 'check_outcome',
  indexes: [{ properties: ['studyId', 'entryId'] }],
  properties: {
    id: id(),
    studyId: () => p.manyToOne(StudySchema).mapToPk().fieldName('study_id'),
    entryId: p.uuid(),
    address: p.string().length(200),
    checkId: p.string().length(80),
    instrumentVersionId: () =>
      p.manyToOne(InstrumentVersionSchema).mapToPk().fieldName('instrument_version_id'),
    severity: p.enum(['hard', 'soft'] as const),
    /** The recorded value that was submitted. */
    valueId: p.uuid(),
    outcome: p.enum(['refused', 'asked', 'confirmed', 'changed'] as const),
    reason: p.text().nullable(),
    level: p.enum(['open', 'unblinding'] as const),
    at: p.datetime(),
  },
});
export type CheckOutcome = InferEntity<typeof CheckOutcomeSchema>;
audited(CheckOutcomeSchema, { subject: 'check-outcome', chain: 'study', columns: {} });
