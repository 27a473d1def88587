import { defineEntity, p, type InferEntity } from '@mikro-orm/postgresql';
import { id, revision } from '#backend/database/columns.ts';
import { audited } from '#backend/database/audited.ts';
import { PersonSchema } from '../accounts/person.entity.ts';
import { SiteSchema } from '../studies/site.entity.ts';
import { StudySchema } from '../studies/study.entity.ts';
import { ParticipantSchema } from './participant.entity.ts';

/** A sealed list: its digest is public from the first day, its making is opened after unblinding (RB-12). */
export const AllocationListSchema = defineEntity({
  name: 'AllocationList',
  tableName: 'allocation_list',
  properties: {
    id: id(),
    studyId: () => p.manyToOne(StudySchema).mapToPk().fieldName('study_id').unique(),
    sealedById: () => p.manyToOne(PersonSchema).mapToPk().fieldName('sealed_by_id'),
    sealedAt: p.datetime(),
    /** SHA-256 over salt and the RFC 8785 form of the list, hex. */
    commitment: p.string().length(64),
    /** Seed, salt and block sizes, sealed with the application's key until unblinding. */
    sealedMaking: p.blob(),
    slots: p.integer(),
  },
});
export type AllocationList = InferEntity<typeof AllocationListSchema>;
audited(AllocationListSchema, {
  subject: 'allocation-list',
  chain: 'study',
  columns: { sealedMaking: 'skip' },
});

/** One place in the list; which sequence it holds is for unblinded members only. */
export const AllocationSlotSchema = defineEntity({
  name: 'AllocationSlot',
  tableName: 'allocation_slot',
  uniques: [{ properties: ['listId', 'siteId', 'position'] }],
  properties: {
    id: id(),
    studyId: () => p.manyToOne(StudySchema).mapToPk().fieldName('study_id'),
    listId: () => p.manyToOne(AllocationListSchema).mapToPk().fieldName('list_id'),
    siteId: () => p.manyToOne(SiteSchema).mapToPk().fieldName('site_id'),
    position: p.integer(),
    sequenceKey: p.string().length(40),
    participantId: () =>
      p.manyToOne(ParticipantSchema).mapToPk().fieldName('participant_id').nullable().unique(),
    assignedAt: p.datetime().nullable(),
    revision: revision(),
  },
});
export type AllocationSlot = InferEntity<typeof AllocationSlotSchema>;
audited(AllocationSlotSchema, {
  subject: 'allocation-slot',
  chain: 'study',
  columns: { sequenceKey: 'unblinding', position: 'unblinding', revision: 'skip' },
});

/** One participant's condition opened in an emergency, by the study physician alone (RB-06). */
export const EmergencyOpeningSchema = defineEntity({
  name: 'EmergencyOpening',
  tableName: 'emergency_opening',
  properties: {
    id: id(),
    studyId: () => p.manyToOne(StudySchema).mapToPk().fieldName('study_id'),
    participantId: () => p.manyToOne(ParticipantSchema).mapToPk().fieldName('participant_id'),
    openedById: () => p.manyToOne(PersonSchema).mapToPk().fieldName('opened_by_id'),
    openedAt: p.datetime(),
    reason: p.text(),
  },
});
audited(EmergencyOpeningSchema, {
  subject: 'emergency-opening',
  chain: 'study',
  columns: { reason: 'skip' },
});

/** The planned unblinding of the whole study: two people, one after the other (RB-08). */
export const UnblindingSchema = defineEntity({
  name: 'Unblinding',
  tableName: 'unblinding',
  properties: {
    id: id(),
    studyId: () => p.manyToOne(StudySchema).mapToPk().fieldName('study_id').unique(),
    requestedById: () => p.manyToOne(PersonSchema).mapToPk().fieldName('requested_by_id'),
    requestedAt: p.datetime(),
    reason: p.text(),
    confirmedById: () => p.manyToOne(PersonSchema).mapToPk().fieldName('confirmed_by_id').nullable(),
    confirmedAt: p.datetime().nullable(),
    revision: revision(),
  },
});
export type Unblinding = InferEntity<typeof UnblindingSchema>;
audited(UnblindingSchema, {
  subject: 'unblinding',
  chain: 'study',
  columns: { reason: 'skip', revision: 'skip' },
});
