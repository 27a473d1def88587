import type { Action, SubjectName } from '#schemas/abilities/ability.ts';

export interface Tab {
  label: string;
  /** Below `/studies/:studyCode/`, or below `/administration/` for the system's. */
  path: string;
  /** Shown to those who may; `null` to all. */
  ability: [Action, SubjectName] | null;
  /** The letter after `g`. */
  key: string;
}

/** The study's tabs in the order of the row. Each has a page in `routes.tsx`. */
export const studyTabs: readonly Tab[] = [
  { label: 'Now', path: 'now', ability: null, key: 'n' },
  { label: 'Visit ribbon', path: 'ribbon', ability: ['read', 'Visit'], key: 'r' },
  { label: 'Participants', path: 'participants', ability: ['read', 'Participant'], key: 'p' },
  { label: 'Allocation', path: 'allocation', ability: ['read', 'AllocationList'], key: 't' },
  { label: 'Visits', path: 'visits', ability: ['read', 'Visit'], key: 'v' },
  { label: 'Verification desk', path: 'verification', ability: ['verify', 'Entry'], key: 'd' },
  { label: 'Queries', path: 'queries', ability: ['read', 'Query'], key: 'q' },
  { label: 'Instruments', path: 'instruments', ability: ['read', 'InstrumentVersion'], key: 'i' },
  { label: 'Protocol', path: 'protocol', ability: ['read', 'ProtocolVersion'], key: 'o' },
  { label: 'Study', path: 'study', ability: ['read', 'Study'], key: 'y' },
  { label: 'Cuts', path: 'cuts', ability: ['read', 'Cut'], key: 'c' },
  { label: 'Plans', path: 'plans', ability: ['read', 'PlanVersion'], key: 'l' },
  { label: 'Runs', path: 'runs', ability: ['read', 'Run'], key: 'u' },
  { label: 'Exports', path: 'exports', ability: ['read', 'ExportRequest'], key: 'e' },
  { label: 'Records', path: 'records', ability: ['read', 'StudyLock'], key: 's' },
  { label: 'Audit trail', path: 'audit', ability: ['read', 'AuditEvent'], key: 'a' },
];

/** The administrator's tabs, outside of any study. */
export const administrationTabs: readonly Tab[] = [
  { label: 'People', path: 'people', ability: ['administer', 'Person'], key: 'p' },
  { label: 'Studies', path: 'studies', ability: ['administer', 'Study'], key: 's' },
  { label: 'System trail', path: 'audit', ability: ['read', 'AuditEvent'], key: 'a' },
];
