import { cautionTexts } from '../vocabulary/caution-texts.ts';
import { designs, measuredQuantities, stepPerformers } from './protocol.ts';

const text = (maxLength: number) => ({ type: 'string', minLength: 1, maxLength }) as const;
const key = { type: 'string', pattern: '^[a-z][a-z0-9]*(-[a-z0-9]+)*$', maxLength: 60 } as const;
const count = (minimum: number, maximum: number) => ({ type: 'integer', minimum, maximum }) as const;
const minutes = { type: 'number', minimum: 0, maximum: 1440 } as const;
const closed = <Properties extends object>(properties: Properties, required: (keyof Properties & string)[]) =>
  ({ type: 'object', properties, required, additionalProperties: false }) as const;
const list = <Items extends object>(items: Items, maxItems: number, minItems = 0) =>
  ({ type: 'array', items, minItems, maxItems }) as const;

const labelled = closed({ key, label: text(80) }, ['key', 'label']);
const pointer = { type: 'string', pattern: '^(/[a-z][A-Za-z0-9]*)+$', maxLength: 200 } as const;
const valueReference = closed({ visitType: key, step: key, pointer }, ['step', 'pointer']);

const anchor = {
  oneOf: [
    closed({ kind: { const: 'visit-start' } }, ['kind']),
    closed({ kind: { const: 'event' }, step: key }, ['kind', 'step']),
  ],
} as const;

const holdPoint = {
  oneOf: [
    closed({ kind: { const: 'minutes-since' }, label: text(120), minutes, step: key }, [
      'kind',
      'label',
      'minutes',
      'step',
    ]),
    closed(
      {
        kind: { const: 'expression' },
        label: text(120),
        expression: text(2000),
        inputs: {
          type: 'object',
          propertyNames: { pattern: '^[a-z][A-Za-z0-9]*$', maxLength: 40 },
          additionalProperties: valueReference,
          minProperties: 1,
          maxProperties: 10,
        },
      },
      ['kind', 'label', 'expression', 'inputs'],
    ),
  ],
} as const;

const runSheetStep = closed(
  {
    key,
    label: text(80),
    anchor,
    plannedMinute: minutes,
    durationMinutes: minutes,
    instrument: key,
    performedBy: { enum: stepPerformers },
    instructions: text(2000),
    holdPoint,
    event: text(80),
    maximumMinutes: minutes,
    caution: { enum: Object.keys(cautionTexts) },
  },
  ['key', 'label', 'anchor', 'plannedMinute', 'durationMinutes', 'performedBy'],
);

const quantity = { enum: Object.keys(measuredQuantities) } as const;
const measure = closed(
  {
    key,
    timePoint: key,
    quantity,
    from: list(valueReference, 10, 1),
    combine: { enum: ['mean', 'only'] },
    unblinding: { type: 'boolean' },
  },
  ['key', 'timePoint', 'quantity', 'from', 'combine'],
);

const visitType = closed(
  {
    key,
    label: text(80),
    targetDay: { type: 'integer', minimum: -3650, maximum: 3650, not: { const: 0 } },
    windowBefore: count(0, 365),
    windowAfter: count(0, 365),
    period: count(1, 20),
    runSheet: list(runSheetStep, 100),
    blocks: list(
      closed(
        {
          key,
          label: text(80),
          steps: list(key, 20, 1),
          repeats: list(labelled, 20, 1),
          minutesApart: minutes,
        },
        ['key', 'label', 'steps', 'repeats', 'minutesApart'],
      ),
      10,
    ),
    measures: list(measure, 60),
  },
  ['key', 'label', 'targetDay', 'windowBefore', 'windowAfter', 'runSheet', 'measures'],
);

const liveQuantity = closed(
  {
    key,
    label: text(80),
    quantity: { type: 'string', pattern: '^[a-z][A-Za-z0-9_]*$', maxLength: 80 },
    inputs: {
      type: 'object',
      additionalProperties: {
        oneOf: [
          quantity,
          closed({ value: { type: 'number' }, unit: text(40) }, ['value', 'unit']),
          closed({ live: key }, ['live']),
        ],
      },
      minProperties: 1,
      maxProperties: 20,
    },
    unblinding: { type: 'boolean' },
  },
  ['key', 'label', 'quantity', 'inputs', 'unblinding'],
);

/** JSON Schema (2020-12) of a protocol's content. What its parts ask of one another is checked by `check-protocol.ts`. */
export const protocolSchema = closed(
  {
    title: text(200),
    design: { enum: designs },
    plannedParticipants: count(1, 100_000),
    conditions: list(labelled, 20, 1),
    sequences: list(
      closed({ key, label: text(80), conditions: list(key, 20, 1) }, ['key', 'label', 'conditions']),
      50,
      1,
    ),
    washoutDays: count(0, 3650),
    sites: list(key, 200, 1),
    allocation: closed({ blockSizes: list(count(1, 100), 10), stratifyBySite: { type: 'boolean' } }, [
      'blockSizes',
      'stratifyBySite',
    ]),
    visitTypes: list(visitType, 60, 1),
    liveQuantities: list(liveQuantity, 30),
    participantLogs: list(closed({ instrument: key, label: text(80) }, ['instrument', 'label']), 20),
    missedVisitReasons: list(text(80), 30, 1),
    safetyLimits: list(closed({ key, label: text(80), text: text(1000) }, ['key', 'label', 'text']), 30),
  },
  [
    'title',
    'design',
    'plannedParticipants',
    'conditions',
    'sequences',
    'sites',
    'allocation',
    'visitTypes',
    'liveQuantities',
    'participantLogs',
    'missedVisitReasons',
    'safetyLimits',
  ],
);
