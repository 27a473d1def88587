import { instrumentLimits } from './limits.ts';

const text = (maxLength: number) => ({ type: 'string', minLength: 1, maxLength }) as const;
const schema = { $ref: '#/$defs/schema' } as const;
const schemaList = { type: 'array', items: schema, minItems: 1, maxItems: 20 } as const;
const names = {
  type: 'array',
  items: { $ref: '#/$defs/propertyName' },
  uniqueItems: true,
  maxItems: instrumentLimits.fields,
} as const;
const scalar = { type: ['string', 'number', 'boolean'], maxLength: 200 } as const;
const count = { type: 'integer', minimum: 0, maximum: 100_000 } as const;
const reasons = { type: 'array', items: text(60), minItems: 1, maxItems: 30, uniqueItems: true } as const;

/** The keywords of JSON Schema that instruments use. */
const standardKeywords = {
  $id: { ...text(200), description: 'A name for this version.' },
  $comment: { ...text(1000), description: 'A note to other authors. Never shown to coordinators.' },
  $ref: {
    type: 'string',
    pattern: '^#/\\$defs/[A-Za-z][A-Za-z0-9]*$',
    description: 'A definition of this document.',
  },
  title: { ...text(80), description: 'The label. At most 40 characters travel to ODM and CDISC.' },
  description: { ...text(1000), description: 'Help beside the field.' },
  type: {
    enum: ['object', 'array', 'string', 'number', 'integer', 'boolean'],
    description: 'object groups fields; array holds readings or several choices.',
  },
  properties: {
    type: 'object',
    propertyNames: { $ref: '#/$defs/propertyName' },
    additionalProperties: schema,
    maxProperties: instrumentLimits.fields,
    description: 'The fields.',
  },
  required: { ...names, description: 'Fields without which the entry cannot be completed.' },
  additionalProperties: { const: false, description: 'Nothing but the fields named here.' },
  unevaluatedProperties: {
    const: false,
    description: 'Nothing but the fields named here or in a condition that holds.',
  },
  dependentRequired: {
    type: 'object',
    propertyNames: { $ref: '#/$defs/propertyName' },
    additionalProperties: names,
    description: 'Fields that become required when another is filled in.',
  },
  dependentSchemas: {
    type: 'object',
    propertyNames: { $ref: '#/$defs/propertyName' },
    additionalProperties: schema,
    description: 'What holds when a field is filled in.',
  },
  items: { ...schema, description: 'One reading, or one choice.' },
  minItems: count,
  maxItems: { ...count, description: 'The most readings there can be, replacements included.' },
  uniqueItems: { type: 'boolean' },
  enum: {
    type: 'array',
    items: scalar,
    minItems: 1,
    maxItems: 100,
    uniqueItems: true,
    description: 'The choices.',
  },
  const: scalar,
  default: scalar,
  minimum: { type: 'number', description: 'Below it no value is taken: the hard limit.' },
  maximum: { type: 'number', description: 'Above it no value is taken: the hard limit.' },
  exclusiveMinimum: { type: 'number' },
  exclusiveMaximum: { type: 'number' },
  multipleOf: { type: 'number', exclusiveMinimum: 0 },
  minLength: count,
  maxLength: count,
  pattern: {
    ...text(instrumentLimits.patternCharacters),
    description: 'A regular expression. It matches anywhere unless it begins with ^ and ends with $.',
  },
  format: { enum: ['date', 'date-time'], description: 'Asserted here: 2026-02-30 is refused.' },
  allOf: schemaList,
  anyOf: schemaList,
  oneOf: schemaList,
  not: schema,
  if: schema,
  then: schema,
  else: schema,
} as const;

/** The annotations that are our own. */
const ownKeywords = {
  unit: { ...text(40), description: 'UCUM code, such as mm[Hg], mL/min/dL, L/L; 1 for a plain number.' },
  identifying: {
    enum: ['none', 'quasi'],
    description:
      'quasi: may single a person out together with other values. Counted in the disclosure report.',
  },
  unblinding: {
    type: 'boolean',
    description: 'Would reveal the condition: hidden from blinded members, with all that comes from it.',
  },
  freeText: { type: 'boolean', description: 'Own words: leaves the study only after it was read.' },
  source: { type: 'boolean', description: 'Is verified against a source document.' },
  readings: {
    $ref: '#/$defs/readings',
    description: 'How often it is read, which readings count, how they become one value.',
  },
  derive: {
    $ref: '#/$defs/derive',
    description: 'Computed: a CEL expression, or a quantity of the library with its inputs.',
  },
  missingReasons: { ...reasons, description: 'Why a value may be missing.' },
  testCode: {
    type: 'string',
    pattern: '^[A-Z_][A-Z0-9_]{0,7}$',
    description: 'CDISC test code: at most eight capitals, digits, underscores, no digit first.',
  },
  choiceLabels: {
    type: 'array',
    items: text(80),
    minItems: 1,
    maxItems: 100,
    description: 'The words for enum, in its order.',
  },
} as const;

const key = { type: 'string', pattern: '^[a-z][a-z0-9]*(-[a-z0-9]+)*$', maxLength: 60 } as const;

/**
 * JSON Schema (2020-12) of what an instrument may be: a closed list of keywords.
 * What one keyword asks of another (readings need a list of numbers) is checked by `compile-instrument.ts`.
 */
export const instrumentMetaSchema = {
  $schema: 'https://json-schema.org/draft/2020-12/schema',
  title: 'Instrument',
  type: 'object',
  properties: {
    ...standardKeywords,
    ...ownKeywords,
    $schema: { const: 'https://json-schema.org/draft/2020-12/schema', description: 'The dialect.' },
    $defs: {
      type: 'object',
      propertyNames: { pattern: '^[A-Za-z][A-Za-z0-9]*$', maxLength: 40 },
      additionalProperties: schema,
      maxProperties: 50,
      description: 'Definitions that $ref names.',
    },
    instrumentKey: {
      ...key,
      description: 'What stays the same from version to version, such as resting-pressures.',
    },
    type: { const: 'object' },
    checks: {
      type: 'array',
      items: { $ref: '#/$defs/check' },
      maxItems: instrumentLimits.checks,
      description: 'Edit checks over one or several fields.',
    },
    cautions: {
      type: 'array',
      items: key,
      maxItems: 5,
      uniqueItems: true,
      description: 'Cautions shown above the form.',
    },
  },
  required: ['$schema', 'instrumentKey', 'title', 'type', 'properties'],
  additionalProperties: false,
  $defs: {
    propertyName: { type: 'string', pattern: '^[a-z][A-Za-z0-9]*$', maxLength: 40 },
    schema: {
      type: 'object',
      properties: { ...standardKeywords, ...ownKeywords },
      additionalProperties: false,
    },
    readings: {
      type: 'object',
      properties: {
        count: { type: 'integer', minimum: 1, maximum: instrumentLimits.readings },
        minimum: { type: 'integer', minimum: 1, maximum: instrumentLimits.readings },
        discardFirst: { type: 'integer', minimum: 0, maximum: 10 },
        use: {
          anyOf: [
            { const: 'all' },
            {
              type: 'object',
              properties: { last: { type: 'integer', minimum: 1, maximum: instrumentLimits.readings } },
              required: ['last'],
              additionalProperties: false,
            },
          ],
        },
        summary: { enum: ['mean', 'median'] },
        extraIfDiffer: {
          type: 'object',
          properties: { by: { type: 'number', exclusiveMinimum: 0 } },
          required: ['by'],
          additionalProperties: false,
        },
        rejectionReasons: reasons,
        replaceRejected: { type: 'boolean' },
        together: key,
      },
      required: ['count', 'minimum', 'use', 'summary', 'replaceRejected'],
      additionalProperties: false,
    },
    derive: {
      anyOf: [
        text(2000),
        {
          type: 'object',
          properties: {
            quantity: { type: 'string', pattern: '^[a-z][A-Za-z0-9_]*$', maxLength: 80 },
            inputs: {
              type: 'object',
              additionalProperties: {
                anyOf: [
                  { type: 'string', pattern: '^(/[a-z][A-Za-z0-9]*)+$' },
                  {
                    type: 'object',
                    properties: { value: { type: 'number' }, unit: text(40) },
                    required: ['value', 'unit'],
                    additionalProperties: false,
                  },
                ],
              },
              maxProperties: 20,
            },
          },
          required: ['quantity', 'inputs'],
          additionalProperties: false,
        },
      ],
    },
    check: {
      type: 'object',
      properties: {
        id: key,
        severity: { enum: ['hard', 'soft'] },
        expression: text(2000),
        message: text(300),
        fields: {
          type: 'array',
          items: { type: 'string', pattern: '^(/[a-z][A-Za-z0-9]*)+$' },
          minItems: 1,
          maxItems: 20,
          uniqueItems: true,
        },
        readings: { enum: ['counted', 'entered'] },
        opensQuery: { type: 'boolean' },
      },
      required: ['id', 'severity', 'expression', 'message', 'fields'],
      additionalProperties: false,
    },
  },
} as const;

/** The annotations of our own, which Ajv must be told of. */
export const ownInstrumentKeywords: readonly string[] = [
  ...Object.keys(ownKeywords),
  'instrumentKey',
  'checks',
  'cautions',
];
