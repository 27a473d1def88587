import { levels, participantStates, visitStates, entryStates } from '../vocabulary/states.ts';

const object = { type: 'object', additionalProperties: false } as const;
const uuid = { type: 'string', format: 'uuid' } as const;
const date = { type: 'string', format: 'date' } as const;
const instant = { type: 'string', format: 'date-time' } as const;
const address = { type: 'string', maxLength: 200, pattern: '^/[A-Za-z0-9/]+(!rejected)?$' } as const;
const reason = { type: 'string', minLength: 3, maxLength: 2000, pattern: '\\S[^]*\\S' } as const;

/** One field or single reading: a value with the digits as written, a reason why there is none, or nothing any more. */
export interface Operation {
  pointer: string;
  value?: string | number | boolean | string[] | null;
  written?: string;
  missing?: string;
  rejected?: string | null;
}

const operation = {
  ...object,
  required: ['pointer'],
  properties: {
    pointer: address,
    value: {
      anyOf: [
        { type: 'string', maxLength: 20_000 },
        { type: 'number' },
        { type: 'boolean' },
        { type: 'null' },
        { type: 'array', maxItems: 100, items: { type: 'string', maxLength: 200 } },
      ],
    },
    written: { type: 'string', maxLength: 60 },
    missing: { type: 'string', maxLength: 60 },
    rejected: { anyOf: [{ type: 'null' }, { type: 'string', maxLength: 60 }] },
  },
  oneOf: [{ required: ['value'] }, { required: ['missing'] }, { required: ['rejected'] }],
} as const;

const confirmation = {
  ...object,
  required: ['checkId', 'reason'],
  properties: { checkId: { type: 'string', maxLength: 80 }, reason },
} as const;

export const saveEntryBody = {
  ...object,
  required: ['operations'],
  properties: {
    operations: { type: 'array', minItems: 1, maxItems: 500, items: operation },
    confirmations: { type: 'array', maxItems: 50, items: confirmation },
  },
} as const;
export interface SaveEntryBody {
  operations: Operation[];
  confirmations?: { checkId: string; reason: string }[];
}

export const correctEntryBody = {
  ...object,
  required: ['operations', 'reason'],
  properties: { ...saveEntryBody.properties, reason },
} as const;
export interface CorrectEntryBody extends SaveEntryBody {
  reason: string;
}

/** What completion asks is answered with a reason: one more reading that was not taken, a check that could not run. */
export const completeEntryBody = {
  ...object,
  properties: { confirmations: { type: 'array', maxItems: 50, items: confirmation } },
} as const;
export interface CompleteEntryBody {
  confirmations?: { checkId: string; reason: string }[];
}

export const emptyBody = { ...object, properties: {} } as const;

export const openEntryBody = {
  ...object,
  required: ['stepKey'],
  properties: { stepKey: { type: 'string', maxLength: 60 } },
} as const;
export interface OpenEntryBody {
  stepKey: string;
}

export const openLogEntryBody = {
  ...object,
  required: ['instrumentKey'],
  properties: { instrumentKey: { type: 'string', maxLength: 60 } },
} as const;
export interface OpenLogEntryBody {
  instrumentKey: string;
}

export const voidEntryBody = { ...object, required: ['reason'], properties: { reason } } as const;

export const planVisitBody = {
  ...object,
  required: ['visitTypeKey', 'plannedOn'],
  properties: { visitTypeKey: { type: 'string', maxLength: 60 }, plannedOn: date },
} as const;
export interface PlanVisitBody {
  visitTypeKey: string;
  plannedOn: string;
}

export const rescheduleVisitBody = {
  ...object,
  required: ['plannedOn', 'reason'],
  properties: { plannedOn: date, reason },
} as const;
export interface RescheduleVisitBody {
  plannedOn: string;
  reason: string;
}

export const missVisitBody = {
  ...object,
  required: ['missedReason'],
  properties: { missedReason: { type: 'string', minLength: 1, maxLength: 60 }, note: reason },
} as const;
export interface MissVisitBody {
  missedReason: string;
  note?: string;
}

export const beginVisitBody = {
  ...object,
  required: ['startedAt'],
  properties: { startedAt: instant },
} as const;
export interface BeginVisitBody {
  startedAt: string;
}

export const stepEventKinds = [
  'begun',
  'ended',
  'stamped',
  'hold-passed',
  'skipped',
  'distress-stop',
] as const;
export type StepEventKind = (typeof stepEventKinds)[number];
export const stampStepBody = {
  ...object,
  required: ['stepKey', 'kind', 'observedAt'],
  properties: {
    stepKey: { type: 'string', maxLength: 60 },
    kind: { enum: stepEventKinds },
    observedAt: instant,
    reason,
  },
} as const;
export interface StampStepBody {
  stepKey: string;
  kind: StepEventKind;
  observedAt: string;
  reason?: string;
}

export const noteDeviationBody = {
  ...object,
  required: ['description'],
  properties: {
    description: reason,
    reason,
    stepKey: { type: 'string', maxLength: 60 },
    level: { enum: levels },
  },
} as const;
export interface NoteDeviationBody {
  description: string;
  reason?: string;
  stepKey?: string;
  level?: (typeof levels)[number];
}

/** A value that the viewer may not know stands in its place, and says nothing. */
export interface HiddenValue {
  hidden: true;
}

export interface ValueDto {
  value?: string | number | boolean | string[];
  written?: string;
  missing?: string;
  unit?: string;
  /** Of a derived value: the rule and its version, and what it warns of. */
  rule?: string;
  cautions?: { code: string; message: string }[];
}

export interface FindingDto {
  checkId: string;
  severity: 'hard' | 'soft';
  pointers: string[];
  message: string;
  /** A soft check that was answered with a reason. */
  confirmed?: string;
}

/** What became of a submitted value that was not stored. */
export interface RefusalDto {
  pointer: string;
  checkId: string;
  severity: 'hard' | 'soft';
  message: string;
}

export interface EntryDto {
  id: string;
  state: (typeof entryStates)[number];
  revision: number;
  visitId: string | null;
  stepKey: string | null;
  participantId: string;
  participantCode: string;
  performedBy: string;
  instrument: { versionId: string; key: string; version: number; title: string; hash: string };
  completedAt: string | null;
  contentHash: string;
  values: Record<string, ValueDto | HiddenValue>;
  derived: Record<string, ValueDto | HiddenValue>;
  findings: FindingDto[];
  /** Addresses, of the request that is answered, that were not stored. */
  refused: RefusalDto[];
}

const valueDto = {
  anyOf: [
    { ...object, required: ['hidden'], properties: { hidden: { const: true } } },
    {
      ...object,
      properties: {
        value: {},
        written: { type: 'string' },
        missing: { type: 'string' },
        unit: { type: 'string' },
        rule: { type: 'string' },
        cautions: {
          type: 'array',
          items: {
            ...object,
            required: ['code', 'message'],
            properties: { code: { type: 'string' }, message: { type: 'string' } },
          },
        },
      },
    },
  ],
} as const;

const refusalDto = {
  ...object,
  required: ['pointer', 'checkId', 'severity', 'message'],
  properties: {
    pointer: { type: 'string' },
    checkId: { type: 'string' },
    severity: { enum: ['hard', 'soft'] },
    message: { type: 'string' },
  },
} as const;

export const entryDto = {
  ...object,
  required: [
    'id',
    'state',
    'revision',
    'visitId',
    'stepKey',
    'participantId',
    'participantCode',
    'performedBy',
    'instrument',
    'completedAt',
    'contentHash',
    'values',
    'derived',
    'findings',
    'refused',
  ],
  properties: {
    id: uuid,
    state: { enum: entryStates },
    revision: { type: 'integer' },
    visitId: { anyOf: [uuid, { type: 'null' }] },
    stepKey: { type: ['string', 'null'] },
    participantId: uuid,
    participantCode: { type: 'string' },
    performedBy: { type: 'string' },
    instrument: {
      ...object,
      required: ['versionId', 'key', 'version', 'title', 'hash'],
      properties: {
        versionId: uuid,
        key: { type: 'string' },
        version: { type: 'integer' },
        title: { type: 'string' },
        hash: { type: 'string' },
      },
    },
    completedAt: { anyOf: [instant, { type: 'null' }] },
    contentHash: { type: 'string' },
    values: { type: 'object', additionalProperties: valueDto },
    derived: { type: 'object', additionalProperties: valueDto },
    findings: {
      type: 'array',
      items: {
        ...object,
        required: ['checkId', 'severity', 'pointers', 'message'],
        properties: {
          checkId: { type: 'string' },
          severity: { enum: ['hard', 'soft'] },
          pointers: { type: 'array', items: { type: 'string' } },
          message: { type: 'string' },
          confirmed: { type: 'string' },
        },
      },
    },
    refused: { type: 'array', items: refusalDto },
  },
} as const;

/** One line of an entry's history: a change at an address, or a value that a check turned away. */
export interface HistoryLineDto {
  sequence: number;
  at: string;
  actor: string;
  role: string;
  kind: string;
  address: string;
  value: ValueDto | HiddenValue | { redacted: true };
  /** What a check said of it, where one spoke. */
  outcome: { checkId: string; severity: string; outcome: string; reason: string | null } | null;
  reason: string | null;
  derivation: { rule: string; version: string; cause: number } | null;
}

export interface VisitDto {
  id: string;
  participantId: string;
  participantCode: string;
  siteId: string;
  visitTypeKey: string;
  label: string;
  state: (typeof visitStates)[number];
  plannedOn: string;
  windowFrom: string;
  windowTo: string;
  startedAt: string | null;
  endedAt: string | null;
  missedReason: string | null;
  /** Planned, past its window, and neither begun nor missed. */
  overdue: boolean;
  revision: number;
}

export const visitDto = {
  ...object,
  required: [
    'id',
    'participantId',
    'participantCode',
    'siteId',
    'visitTypeKey',
    'label',
    'state',
    'plannedOn',
    'windowFrom',
    'windowTo',
    'startedAt',
    'endedAt',
    'missedReason',
    'overdue',
    'revision',
  ],
  properties: {
    id: uuid,
    participantId: uuid,
    participantCode: { type: 'string' },
    siteId: uuid,
    visitTypeKey: { type: 'string' },
    label: { type: 'string' },
    state: { enum: visitStates },
    plannedOn: date,
    windowFrom: date,
    windowTo: date,
    startedAt: { anyOf: [instant, { type: 'null' }] },
    endedAt: { anyOf: [instant, { type: 'null' }] },
    missedReason: { type: ['string', 'null'] },
    overdue: { type: 'boolean' },
    revision: { type: 'integer' },
  },
} as const;

export interface StepEventDto {
  id: string;
  stepKey: string;
  kind: StepEventKind;
  observedAt: string;
  reason: string | null;
}

export interface DeviationDto {
  id: string;
  stepKey: string | null;
  origin: 'person' | 'run-sheet';
  description: string;
  reason: string | null;
  notedAt: string;
}

/** The run sheet of one visit: its steps by the protocol version it follows, and what has happened. */
export interface RunSheetDto {
  visit: VisitDto;
  participantState: (typeof participantStates)[number];
  timeZone: string;
  serverTime: string;
  protocolVersion: number;
  /** `VisitType` of the protocol, as published. */
  visitType: unknown;
  missedVisitReasons: string[];
  safetyLimits: { key: string; label: string; text: string }[];
  events: StepEventDto[];
  entries: { id: string; stepKey: string; instrumentVersionId: string; state: string; revision: number }[];
  deviations: DeviationDto[];
}

/** A quantity of the visit as it goes: resistance, conductance, viscosity at one time point. */
export interface LiveQuantityDto {
  key: string;
  label: string;
  timePoint: string;
  value?: number;
  unit?: string;
  cautions?: { code: string; message: string }[];
  hidden?: true;
  /** Why there is no value yet. */
  waiting?: string;
  /** The same quantity and time point at the participant's visit before this one. */
  previous?: number;
}
