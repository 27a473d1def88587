import type { HiddenValue, ValueDto } from './capture.ts';
import { queryStates, type QueryState } from '../vocabulary/states.ts';

const object = { type: 'object', additionalProperties: false } as const;
const uuid = { type: 'string', format: 'uuid' } as const;
const text = { type: 'string', minLength: 2, maxLength: 4000, pattern: '\\S[^]*\\S' } as const;
const address = { type: 'string', maxLength: 200, pattern: '^/[A-Za-z0-9/]+$' } as const;

export const askQueryBody = {
  ...object,
  required: ['participantId', 'text'],
  properties: { participantId: uuid, visitId: uuid, entryId: uuid, address, text },
  dependentRequired: { address: ['entryId'] },
} as const;
export interface AskQueryBody {
  participantId: string;
  visitId?: string;
  entryId?: string;
  address?: string;
  text: string;
}

export const queryTextBody = { ...object, required: ['text'], properties: { text } } as const;
export interface QueryTextBody {
  text: string;
}

export const queryListQuery = {
  state: { enum: queryStates },
  participant: { type: 'string', format: 'uuid' },
  visit: { type: 'string', format: 'uuid' },
} as const;

export interface QueryMessageDto {
  author: string;
  kind: 'asked' | 'replied' | 'settled' | 'reopened';
  text: string;
  at: string;
}

export interface QueryDto {
  id: string;
  state: QueryState;
  revision: number;
  participantId: string;
  participantCode: string;
  visitId: string | null;
  visitLabel: string | null;
  entryId: string | null;
  address: string | null;
  /** What the address is called in its instrument. */
  fieldLabel: string | null;
  performedBy: string;
  checkId: string | null;
  openedBy: string;
  openedAt: string;
  ageDays: number;
  messages: QueryMessageDto[];
}

export const verifyBody = {
  ...object,
  required: ['sourceDocumentId', 'fields'],
  properties: {
    sourceDocumentId: uuid,
    fields: {
      type: 'array',
      minItems: 1,
      maxItems: 500,
      items: {
        ...object,
        required: ['entryId', 'revision', 'address'],
        properties: { entryId: uuid, revision: { type: 'integer', minimum: 1 }, address },
      },
    },
  },
} as const;
export interface VerifyBody {
  sourceDocumentId: string;
  fields: { entryId: string; revision: number; address: string }[];
}

export interface VerificationFieldDto {
  entryId: string;
  revision: number;
  step: string;
  address: string;
  label: string;
  value: ValueDto | HiddenValue;
  required: boolean;
  /** `verified` now; `fallen` when the value or source changed since; `open` never verified. */
  state: 'open' | 'verified' | 'fallen';
  mark: { id: string; by: string; at: string; revision: number; because: string | null } | null;
  openQueries: number;
}

export interface VerificationDto {
  visitId: string;
  fields: VerificationFieldDto[];
  done: number;
  needed: number;
}
