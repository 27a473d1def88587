import type { HiddenValue } from './capture.ts';
import { actKinds } from '../vocabulary/act-kinds.ts';

const object = { type: 'object', additionalProperties: false } as const;
const reason = { type: 'string', minLength: 3, maxLength: 2000, pattern: '\\S[^]*\\S' } as const;
const password = { type: 'string', maxLength: 1024 } as const;

/** What is signed, as the server built it and as the signer saw it. */
export interface SignaturePreparationDto {
  visitId: string;
  meaning: string;
  /** True when values were hidden from the signer, who signs that sentence too. */
  withoutUnblindingValues: boolean;
  covered: { type: string; id: string; revision: number; hash: string; label: string }[];
  contentHash: string;
  /** Proves within five minutes that this content was shown to this person. */
  preparation: string;
}

export interface SignatureDto {
  id: string;
  signerName: string;
  role: string;
  signedAt: string;
  meaning: string;
  contentHash: string;
  /** `covers`: what was signed is still what lies there; `changed`: something covered is different now. */
  state: 'covers' | 'changed';
  /** Labels of what changed since. */
  changed: string[];
}

export const signVisitBody = {
  ...object,
  required: ['contentHash', 'preparation', 'password'],
  properties: {
    contentHash: { type: 'string', pattern: '^[0-9a-f]{64}$' },
    preparation: { type: 'string', maxLength: 200 },
    password,
  },
} as const;
export interface SignVisitBody {
  contentHash: string;
  preparation: string;
  password: string;
}

export const openPointKinds = {
  'open-queries': 'queries that are not settled',
  'open-visits': 'visits that are planned or under way',
  'open-entries': 'entries that are not complete',
  'unsigned-visits': 'completed visits without a signature that covers them',
  'unverified-fields': 'values that need verification against source',
  'no-signed-plan': 'no plan has been signed',
} as const;
export type OpenPointKind = keyof typeof openPointKinds;

export interface OpenPointDto {
  kind: OpenPointKind;
  label: string;
  count: number;
}

export const lockBody = {
  ...object,
  required: ['reason', 'password', 'overrides'],
  properties: {
    reason,
    password,
    overrides: {
      type: 'array',
      maxItems: 10,
      items: {
        ...object,
        required: ['kind', 'reason'],
        properties: { kind: { enum: Object.keys(openPointKinds) }, reason },
      },
    },
  },
} as const;
export interface LockBody {
  reason: string;
  password: string;
  overrides: { kind: OpenPointKind; reason: string }[];
}

export const unlockBody = {
  ...object,
  required: ['reason', 'password'],
  properties: { reason, password },
} as const;
export interface UnlockBody {
  reason: string;
  password: string;
}

export interface StudyLockDto {
  kind: 'lock' | 'unlock';
  by: string;
  at: string;
  reason: string;
  openPoints: { kind: string; count: number; override: string | null }[];
}

export const trailQuery = {
  kind: { enum: Object.keys(actKinds) },
  person: { type: 'string', format: 'uuid' },
  participant: { type: 'string', format: 'uuid' },
  subject: { type: 'string', maxLength: 100, pattern: '^[a-z-]+/[0-9a-f-]{36}$' },
  from: { type: 'string', format: 'date-time' },
  to: { type: 'string', format: 'date-time' },
} as const;

export interface TrailChangeDto {
  subject: string;
  address: string;
  before: TrailValue;
  after: TrailValue;
}

/** A value in the trail, or why it is not shown. */
export type TrailValue = { value: unknown; written?: string } | HiddenValue | { redacted: true } | null;

export interface TrailEventDto {
  sequence: number;
  at: string;
  actor: string;
  role: string;
  kind: string;
  words: string;
  subject: string;
  participantCode: string | null;
  siteCode: string | null;
  reason: string | null;
  cause: number | null;
  version: string;
  hash: string;
  changes: TrailChangeDto[];
}
