import {
  CutSchema,
  PlanDraftSchema,
  PlanVersionSchema,
  RunSchema,
} from './modules/analysis/analysis.entity.ts';
import { InvitationSchema } from './modules/accounts/invitation.entity.ts';
import { MembershipSchema } from './modules/accounts/membership.entity.ts';
import { PersonSchema } from './modules/accounts/person.entity.ts';
import { CheckOutcomeSchema, EntrySchema } from './modules/capture/entry.entity.ts';
import { DeviationSchema, StepEventSchema, VisitSchema } from './modules/capture/visit.entity.ts';
import { ExportRequestSchema } from './modules/exports/export-request.entity.ts';
import {
  InstrumentDraftSchema,
  InstrumentPreviewSchema,
  InstrumentVersionSchema,
} from './modules/instruments/instrument.entity.ts';
import {
  QueryMessageSchema,
  QuerySchema,
  VerificationMarkSchema,
} from './modules/monitoring/monitoring.entity.ts';
import {
  AllocationListSchema,
  AllocationSlotSchema,
  EmergencyOpeningSchema,
  UnblindingSchema,
} from './modules/participants/allocation.entity.ts';
import { DirectIdentifiersSchema } from './modules/participants/direct-identifiers.entity.ts';
import { ParticipantSchema } from './modules/participants/participant.entity.ts';
import { ProtocolDraftSchema, ProtocolVersionSchema } from './modules/protocol/protocol.entity.ts';
import { SignatureSchema, StudyLockSchema } from './modules/records/records.entity.ts';
import { SourceDocumentSchema } from './modules/source/source-document.entity.ts';
import { SiteSchema } from './modules/studies/site.entity.ts';
import { StudySchema } from './modules/studies/study.entity.ts';

/** Every entity, once; migrations are checked against this list. */
export const entities = [
  StudySchema,
  SiteSchema,
  PersonSchema,
  MembershipSchema,
  InvitationSchema,
  ProtocolDraftSchema,
  ProtocolVersionSchema,
  InstrumentDraftSchema,
  InstrumentVersionSchema,
  InstrumentPreviewSchema,
  ParticipantSchema,
  DirectIdentifiersSchema,
  AllocationListSchema,
  AllocationSlotSchema,
  EmergencyOpeningSchema,
  UnblindingSchema,
  VisitSchema,
  StepEventSchema,
  DeviationSchema,
  EntrySchema,
  CheckOutcomeSchema,
  SourceDocumentSchema,
  VerificationMarkSchema,
  QuerySchema,
  QueryMessageSchema,
  SignatureSchema,
  StudyLockSchema,
  PlanDraftSchema,
  PlanVersionSchema,
  CutSchema,
  RunSchema,
  ExportRequestSchema,
];
