import { defineEntity, p, type InferEntity } from '@mikro-orm/postgresql';
import { earlierDataChoices } from '#schemas/participants/withdrawal.ts';
import { participantStates } from '#schemas/vocabulary/states.ts';
import { id, oneOf, revision } from '#backend/database/columns.ts';
import { audited } from '#backend/database/audited.ts';
import { ProtocolVersionSchema } from '../protocol/protocol.entity.ts';
import { SiteSchema } from '../studies/site.entity.ts';
import { StudySchema } from '../studies/study.entity.ts';

/** A person in a study, by code; who that is lies in the identity store alone. */
export const ParticipantSchema = defineEntity({
  name: 'Participant',
  tableName: 'participant',
  uniques: [{ properties: ['studyId', 'code'] }],
  indexes: [{ properties: ['studyId', 'siteId', 'code'] }],
  properties: {
    id: id(),
    studyId: () => p.manyToOne(StudySchema).mapToPk().fieldName('study_id'),
    siteId: () => p.manyToOne(SiteSchema).mapToPk().fieldName('site_id'),
    /** Site letters, running number, check character (ISO/IEC 7064): `UP-014-T`. */
    code: p.string().length(12),
    state: oneOf(participantStates).default('screening'),
    enrolledOn: p.date(),
    consentedOn: p.date().nullable(),
    consentVersion: p.string().length(40).nullable(),
    /** When the criteria for taking part were checked and met; nothing is allocated before. */
    eligibleOn: p.date().nullable(),
    withdrawnOn: p.date().nullable(),
    earlierData: oneOf(earlierDataChoices).nullable(),
    /** Whether adverse events may still be followed up after a withdrawal. */
    safetyFollowUp: p.boolean().nullable(),
    protocolVersionId: () => p.manyToOne(ProtocolVersionSchema).mapToPk().fieldName('protocol_version_id'),
    revision: revision(),
  },
});
export type Participant = InferEntity<typeof ParticipantSchema>;
audited(ParticipantSchema, { subject: 'participant', chain: 'study', columns: { revision: 'skip' } });
