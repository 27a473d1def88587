import type { FromSchema } from 'json-schema-to-ts';
import type { InstrumentSchema, SampleEntry } from '../instruments/instrument.ts';
import { reasonBody } from './accounts.ts';

const uuid = { type: 'string', format: 'uuid' } as const;
const object = { type: 'object', additionalProperties: false } as const;
const text = { type: 'string' } as const;
const count = { type: 'integer', minimum: 0 } as const;
const instrumentKey = { type: 'string', pattern: '^[a-z][a-z0-9]*(-[a-z0-9]+)*$', maxLength: 60 } as const;

const entryValue = {
  anyOf: [
    { type: ['string', 'number', 'boolean'] },
    { type: 'array', items: text, maxItems: 200 },
    { ...object, required: ['missing'], properties: { missing: { type: 'string', maxLength: 200 } } },
  ],
} as const;

/** Sample values with what must come of them. */
const samples = {
  type: 'array',
  maxItems: 60,
  items: {
    ...object,
    required: ['name', 'values', 'expect'],
    properties: {
      name: { type: 'string', minLength: 1, maxLength: 120 },
      values: { type: 'object', maxProperties: 1000, additionalProperties: entryValue },
      expect: {
        ...object,
        required: ['outcome'],
        properties: {
          outcome: { enum: ['passes', 'asks', 'refused'] },
          checks: { type: 'array', maxItems: 300, items: { type: 'string', maxLength: 80 } },
          derived: {
            type: 'object',
            maxProperties: 300,
            additionalProperties: { anyOf: [...entryValue.anyOf, { type: 'null' }] },
          },
        },
      },
    },
  },
} as const;

export const startDraftBody = {
  oneOf: [
    { ...object, required: ['from', 'key'], properties: { from: { const: 'library' }, key: instrumentKey } },
    {
      ...object,
      required: ['from', 'key', 'title'],
      properties: {
        from: { const: 'blank' },
        key: instrumentKey,
        title: { type: 'string', minLength: 1, maxLength: 80, pattern: '\\S' },
      },
    },
    {
      ...object,
      required: ['from', 'versionId'],
      properties: { from: { const: 'version' }, versionId: uuid },
    },
  ],
} as const;
export type StartDraftBody =
  | { from: 'library'; key: string }
  | { from: 'blank'; key: string; title: string }
  | { from: 'version'; versionId: string };

export const draftContentBody = {
  ...object,
  required: ['text', 'samples'],
  properties: { text: { type: 'string', maxLength: 400_000 }, samples },
} as const;
export interface DraftContentBody {
  text: string;
  samples: SampleEntry[];
}

export const publishBody = reasonBody;

export const draftDto = {
  ...object,
  required: ['id', 'key', 'title', 'text', 'samples', 'baseVersion', 'changed', 'revision'],
  properties: {
    id: uuid,
    key: text,
    title: text,
    text,
    samples,
    /** The version it was begun from; null for a new instrument. */
    baseVersion: { type: ['integer', 'null'] },
    /** Whether it says anything that the version it was begun from does not. */
    changed: { type: 'boolean' },
    revision: count,
  },
} as const;
export interface DraftDto extends DraftContentBody {
  id: string;
  key: string;
  title: string;
  baseVersion: number | null;
  changed: boolean;
  revision: number;
}

/** A difference that a person can read: whose, which part of it, from what to what. */
export const differenceDto = {
  ...object,
  required: ['subject', 'aspect', 'kind', 'before', 'after', 'breaking'],
  properties: {
    subject: text,
    aspect: { type: ['string', 'null'] },
    kind: { enum: ['added', 'removed', 'changed', 'reordered'] },
    before: { type: ['string', 'null'] },
    after: { type: ['string', 'null'] },
    /** Values of the versions before cannot be read as the same field any more. */
    breaking: { type: 'boolean' },
  },
} as const;
export type DifferenceDto = FromSchema<typeof differenceDto>;

/** A problem in a text: what is wrong, where, how much it matters. */
export const textProblemDto = {
  ...object,
  required: ['pointer', 'message', 'severity', 'from', 'to', 'line', 'column'],
  properties: {
    pointer: text,
    message: text,
    severity: { enum: ['error', 'warning'] },
    from: count,
    to: count,
    line: count,
    column: count,
  },
} as const;
export type TextProblemDto = FromSchema<typeof textProblemDto>;

export const verdictDto = {
  ...object,
  required: ['publishable', 'problems', 'samples', 'differences', 'validatorHash'],
  properties: {
    publishable: { type: 'boolean' },
    problems: { type: 'array', items: textProblemDto },
    samples: {
      type: 'array',
      items: {
        ...object,
        required: ['name', 'passed', 'differences', 'outcome', 'checks'],
        properties: {
          name: text,
          passed: { type: 'boolean' },
          differences: { type: 'array', items: text },
          outcome: { enum: ['passes', 'asks', 'refused'] },
          checks: { type: 'array', items: text },
        },
      },
    },
    differences: { type: 'array', items: differenceDto },
    /** Under which the form's validator is served; null while the schema has problems. */
    validatorHash: { type: ['string', 'null'] },
  },
} as const;
export type VerdictDto = FromSchema<typeof verdictDto>;

export const versionSummaryDto = {
  ...object,
  required: ['id', 'key', 'version', 'title', 'hash', 'reason', 'authorName', 'publishedAt'],
  properties: {
    id: uuid,
    key: text,
    version: count,
    title: text,
    hash: text,
    reason: text,
    authorName: text,
    publishedAt: text,
  },
} as const;
export type VersionSummaryDto = FromSchema<typeof versionSummaryDto>;

export const versionDto = {
  ...object,
  required: [...versionSummaryDto.required, 'schema', 'samples', 'newest'],
  properties: {
    ...versionSummaryDto.properties,
    schema: { type: 'object' },
    samples,
    newest: { type: 'boolean' },
  },
} as const;
export interface VersionDto extends VersionSummaryDto {
  schema: InstrumentSchema;
  samples: SampleEntry[];
  newest: boolean;
}

/** An instrument of the study: its newest version, and its draft for those who may see drafts. */
export const instrumentDto = {
  ...object,
  required: ['key', 'title', 'newest', 'draft'],
  properties: {
    key: text,
    title: text,
    newest: { anyOf: [{ type: 'null' }, versionSummaryDto] },
    draft: {
      anyOf: [
        { type: 'null' },
        {
          ...object,
          required: ['id', 'baseVersion', 'changed', 'revision'],
          properties: {
            id: uuid,
            baseVersion: { type: ['integer', 'null'] },
            changed: { type: 'boolean' },
            revision: count,
          },
        },
      ],
    },
  },
} as const;
export interface InstrumentDto {
  key: string;
  title: string;
  newest: VersionSummaryDto | null;
  draft: Pick<DraftDto, 'id' | 'baseVersion' | 'changed' | 'revision'> | null;
}

export const libraryInstrumentDto = {
  ...object,
  required: ['key', 'title', 'description', 'fields'],
  properties: { key: text, title: text, description: { type: ['string', 'null'] }, fields: count },
} as const;
export type LibraryInstrumentDto = FromSchema<typeof libraryInstrumentDto>;
