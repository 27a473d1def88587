import type { MongoAbility, RawRuleOf } from '@casl/ability';
import type { Role } from '../vocabulary/roles.ts';

/** What is done. `read` decides what one may know of; the others are asked about a loaded row. */
export const actions = [
  'read',
  'create',
  'update',
  'complete',
  'correct',
  'void',
  'publish',
  'sign',
  'countersign',
  'verify',
  'ask',
  'reply',
  'settle',
  'upload',
  'assign',
  'open',
  'seal',
  'unblind',
  'lock',
  'request',
  'decide',
  'download',
  'run',
  'extract',
  'administer',
] as const;
export type Action = (typeof actions)[number];

/** What it is done to; the name of an entity, or of something derived. */
export const subjectNames = [
  'Study',
  'Site',
  'Person',
  'Membership',
  'ProtocolDraft',
  'ProtocolVersion',
  'InstrumentDraft',
  'InstrumentVersion',
  'Participant',
  'DirectIdentifiers',
  'AllocationList',
  'AllocationSlot',
  'Unblinding',
  'Visit',
  'Deviation',
  'Entry',
  'SourceDocument',
  'VerificationMark',
  'Query',
  'Signature',
  'StudyLock',
  'PlanDraft',
  'PlanVersion',
  'Cut',
  'Run',
  'ExportRequest',
  'AuditEvent',
] as const;
export type SubjectName = (typeof subjectNames)[number];

export type AppAbility = MongoAbility<[Action, SubjectName]>;
export type AppRule = RawRuleOf<AppAbility>;

/** The facts of a membership that its rules depend on. */
export interface MembershipFacts {
  personId: string;
  /** Null for the administrator, who belongs to no study. */
  studyId: string | null;
  role: Role;
  /** Null means all sites. */
  siteIds: readonly string[] | null;
  /** Unblinded by work or appointment, or because the study has been unblinded. */
  unblinded: boolean;
}
