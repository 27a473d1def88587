import type { FromSchema } from 'json-schema-to-ts';
import type { Protocol } from '../protocol/protocol.ts';
import { textProblemDto } from './instruments.ts';

const uuid = { type: 'string', format: 'uuid' } as const;
const object = { type: 'object', additionalProperties: false } as const;
const text = { type: 'string' } as const;
const count = { type: 'integer', minimum: 0 } as const;

export const startProtocolDraftBody = {
  ...object,
  required: ['from'],
  properties: { from: { enum: ['blank', 'newest'] } },
} as const;
export type StartProtocolDraftBody = FromSchema<typeof startProtocolDraftBody>;

export const protocolTextBody = {
  ...object,
  required: ['text'],
  properties: { text: { type: 'string', maxLength: 600_000 } },
} as const;
export type ProtocolTextBody = FromSchema<typeof protocolTextBody>;

export const protocolDraftDto = {
  ...object,
  required: ['text', 'baseVersion', 'changed', 'revision'],
  properties: {
    text,
    baseVersion: { type: ['integer', 'null'] },
    changed: { type: 'boolean' },
    revision: count,
  },
} as const;
export type ProtocolDraftDto = FromSchema<typeof protocolDraftDto>;

export const protocolDifferenceDto = {
  ...object,
  required: ['kind', 'sentence', 'visitType'],
  properties: {
    kind: { enum: ['added', 'removed', 'changed', 'reordered'] },
    sentence: text,
    /** The visit type it touches, if one. */
    visitType: { type: ['string', 'null'] },
  },
} as const;
export type ProtocolDifferenceDto = FromSchema<typeof protocolDifferenceDto>;

export const protocolVerdictDto = {
  ...object,
  required: ['publishable', 'problems', 'differences', 'content'],
  properties: {
    publishable: { type: 'boolean' },
    problems: { type: 'array', items: textProblemDto },
    differences: { type: 'array', items: protocolDifferenceDto },
    /** As it would be published; null while there are problems. */
    content: { type: ['object', 'null'] },
  },
} as const;
export interface ProtocolVerdictDto {
  publishable: boolean;
  problems: FromSchema<typeof textProblemDto>[];
  differences: ProtocolDifferenceDto[];
  content: ShownProtocol | null;
}

export const protocolVersionSummaryDto = {
  ...object,
  required: ['id', 'version', 'title', 'hash', 'reason', 'authorName', 'publishedAt'],
  properties: {
    id: uuid,
    version: count,
    title: text,
    hash: text,
    reason: text,
    authorName: text,
    publishedAt: text,
  },
} as const;
export type ProtocolVersionSummaryDto = FromSchema<typeof protocolVersionSummaryDto>;

export const protocolVersionDto = {
  ...object,
  required: [...protocolVersionSummaryDto.required, 'newest', 'content', 'instruments'],
  properties: {
    ...protocolVersionSummaryDto.properties,
    newest: { type: 'boolean' },
    content: { type: 'object' },
    instruments: {
      type: 'array',
      items: {
        ...object,
        required: ['key', 'title', 'versionId'],
        properties: { key: text, title: text, versionId: uuid },
      },
    },
  },
} as const;

/** A protocol as far as its reader may know it: block sizes are not for people who enrol or assess (RB-01). */
export type ShownProtocol = Omit<Protocol, 'allocation'> & {
  allocation: { stratifyBySite: boolean; blockSizes: number[] | null };
};

export interface ProtocolVersionDto extends ProtocolVersionSummaryDto {
  newest: boolean;
  content: ShownProtocol;
  /** Newest published versions of the instruments it fills in. */
  instruments: { key: string; title: string; versionId: string }[];
}

export const enrolmentDto = {
  ...object,
  required: ['state', 'openPoints', 'revision'],
  properties: {
    state: { enum: ['setting-up', 'running', 'locked', 'unblinded'] },
    /** What stands against opening the study for enrolment; empty when it may be opened. */
    openPoints: { type: 'array', items: text },
    /** The study's, for If-Match. */
    revision: count,
  },
} as const;
export type EnrolmentDto = FromSchema<typeof enrolmentDto>;
