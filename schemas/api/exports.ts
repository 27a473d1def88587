import type { ExportState } from '../vocabulary/states.ts';
import type { ProgressDto } from './analysis.ts';

const object = { type: 'object', additionalProperties: false } as const;
const reason = { type: 'string', minLength: 3, maxLength: 2000, pattern: '\\S[^]*\\S' } as const;

export const requestExportBody = {
  ...object,
  required: ['runId', 'purpose'],
  properties: { runId: { type: 'string', format: 'uuid' }, purpose: { ...reason, minLength: 10 } },
} as const;
export interface RequestExportBody {
  runId: string;
  purpose: string;
}

export const decideExportBody = {
  ...object,
  required: ['decision', 'reason', 'password', 'reportHash'],
  properties: {
    decision: { enum: ['approve', 'refuse'] },
    reason,
    password: { type: 'string', maxLength: 1024 },
    /** Of the report that was read: an approval is of exactly this. */
    reportHash: { type: 'string', pattern: '^[0-9a-f]{64}$' },
  },
} as const;
export interface DecideExportBody {
  decision: 'approve' | 'refuse';
  reason: string;
  password: string;
  reportHash: string;
}

/** What would leave, in numbers. */
export interface DisclosureReport {
  method: string;
  cutSha256: string;
  runNumber: number;
  participants: number;
  instruments: { key: string; version: number; rows: number; columns: number }[];
  /** Fields that may single a person out together with others, and what is done about each. */
  quasiIdentifiers: { field: string; treatment: string }[];
  /** Fields that stay out, with why. */
  leftOut: { field: string; why: string }[];
  /** Participants alike in all quasi-identifiers that leave: the smallest group, and how many are alone in theirs. */
  smallestGroup: number;
  alone: number;
  threshold: number;
  agesPooled: number;
  sentence: string;
}

export interface ExportDto {
  id: string;
  number: number;
  state: ExportState;
  revision: number;
  purpose: string;
  runId: string;
  requestedBy: string;
  requestedAt: string;
  mine: boolean;
  report: DisclosureReport;
  reportHash: string;
  decidedBy: string | null;
  decidedAt: string | null;
  decisionReason: string | null;
  sha256: string | null;
  size: number | null;
  readyAt: string | null;
  /** After this the file can no longer be downloaded. */
  expiresAt: string | null;
  downloadedAt: string | null;
  progress: ProgressDto | null;
}
