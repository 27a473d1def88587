import { defineEntity, p, type InferEntity } from '@mikro-orm/postgresql';
import { visitStates } from '#schemas/vocabulary/states.ts';
import { id, oneOf, revision } from '#backend/database/columns.ts';
import { audited } from '#backend/database/audited.ts';
import { ParticipantSchema } from '../participants/participant.entity.ts';
import { ProtocolVersionSchema } from '../protocol/protocol.entity.ts';
import { SiteSchema } from '../studies/site.entity.ts';
import { StudySchema } from '../studies/study.entity.ts';

/** One coming of a participant, of a type that the protocol names. */
export const VisitSchema = defineEntity({
  name: 'Visit',
  tableName: 'visit',
  uniques: [{ properties: ['participantId', 'visitTypeKey'] }],
  indexes: [{ properties: ['studyId', 'siteId', 'plannedOn'] }, { properties: ['studyId', 'state'] }],
  properties: {
    id: id(),
    studyId: () => p.manyToOne(StudySchema).mapToPk().fieldName('study_id'),
    participantId: () => p.manyToOne(ParticipantSchema).mapToPk().fieldName('participant_id'),
    siteId: () => p.manyToOne(SiteSchema).mapToPk().fieldName('site_id'),
    protocolVersionId: () => p.manyToOne(ProtocolVersionSchema).mapToPk().fieldName('protocol_version_id'),
    visitTypeKey: p.string().length(60),
    plannedOn: p.date(),
    windowFrom: p.date(),
    windowTo: p.date(),
    state: oneOf(visitStates).default('planned'),
    /** Observed start and end, entered by people; the trail has the server's own times. */
    startedAt: p.datetime().nullable(),
    endedAt: p.datetime().nullable(),
    missedReason: p.string().length(60).nullable(),
    revision: revision(),
  },
});
export type Visit = InferEntity<typeof VisitSchema>;
audited(VisitSchema, { subject: 'visit', chain: 'study', columns: { revision: 'skip' } });

/** A press on the run sheet: a step begun, ended, an event stamped, a hold point passed with a reason. */
export const StepEventSchema = defineEntity({
  name: 'StepEvent',
  tableName: 'step_event',
  indexes: [{ properties: ['studyId', 'visitId'] }],
  properties: {
    id: id(),
    studyId: () => p.manyToOne(StudySchema).mapToPk().fieldName('study_id'),
    visitId: () => p.manyToOne(VisitSchema).mapToPk().fieldName('visit_id'),
    stepKey: p.string().length(60),
    kind: p.enum(['begun', 'ended', 'stamped', 'hold-passed', 'skipped', 'distress-stop'] as const),
    observedAt: p.datetime(),
    reason: p.text().nullable(),
  },
});
export type StepEvent = InferEntity<typeof StepEventSchema>;
audited(StepEventSchema, { subject: 'step-event', chain: 'study', columns: {} });

/** Something that did not go as the protocol says; noted by people, or by the run sheet itself. */
export const DeviationSchema = defineEntity({
  name: 'Deviation',
  tableName: 'deviation',
  indexes: [{ properties: ['studyId', 'participantId'] }],
  properties: {
    id: id(),
    studyId: () => p.manyToOne(StudySchema).mapToPk().fieldName('study_id'),
    siteId: () => p.manyToOne(SiteSchema).mapToPk().fieldName('site_id'),
    participantId: () => p.manyToOne(ParticipantSchema).mapToPk().fieldName('participant_id'),
    visitId: () => p.manyToOne(VisitSchema).mapToPk().fieldName('visit_id').nullable(),
    stepKey: p.string().length(60).nullable(),
    origin: p.enum(['person', 'run-sheet'] as const),
    description: p.text(),
    reason: p.text().nullable(),
    level: p.enum(['open', 'unblinding'] as const).default('open'),
    notedAt: p.datetime(),
  },
});
export type Deviation = InferEntity<typeof DeviationSchema>;
audited(DeviationSchema, { subject: 'deviation', chain: 'study', columns: {} });
