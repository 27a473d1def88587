import type { FromSchema } from 'json-schema-to-ts';
import { earlierDataChoices, type EarlierData } from '../participants/withdrawal.ts';
import { participantStates, type ParticipantState } from '../vocabulary/states.ts';

const object = { type: 'object', additionalProperties: false } as const;
const uuid = { type: 'string', format: 'uuid' } as const;
const date = { type: 'string', format: 'date' } as const;
const instant = { type: 'string', format: 'date-time' } as const;
const text = { type: 'string' } as const;
const reason = { type: 'string', minLength: 3, maxLength: 2000, pattern: '\\S[^]*\\S' } as const;
const password = { type: 'string', minLength: 1, maxLength: 1024 } as const;
/** One line without control characters that says something. */
const line = {
  type: 'string',
  maxLength: 200,
  pattern: '^[^\\u0000-\\u001f\\u007f]*\\S[^\\u0000-\\u001f\\u007f]*$',
} as const;
const optionalLine = { anyOf: [{ type: 'null' }, line] } as const;
const optionalDate = { anyOf: [{ type: 'null' }, date] } as const;

const identifiersBody = {
  ...object,
  required: ['name', 'birthDate'],
  properties: {
    name: line,
    birthDate: date,
    phone: optionalLine,
    email: { anyOf: [{ type: 'null' }, { type: 'string', format: 'email', maxLength: 254 }] },
    postcode: optionalLine,
    recordNumber: optionalLine,
  },
} as const;
export interface IdentifiersBody {
  name: string;
  birthDate: string;
  phone?: string | null;
  email?: string | null;
  postcode?: string | null;
  recordNumber?: string | null;
}

export const enrolParticipantBody = {
  ...object,
  required: ['siteId', 'identifiers'],
  properties: { siteId: uuid, enrolledOn: date, identifiers: identifiersBody },
} as const;
export interface EnrolParticipantBody {
  siteId: string;
  /** The day at the site; today when left out. */
  enrolledOn?: string;
  identifiers: IdentifiersBody;
}

export const writeIdentifiersBody = {
  ...object,
  required: ['identifiers', 'reason'],
  properties: { identifiers: identifiersBody, reason },
} as const;
export interface WriteIdentifiersBody {
  identifiers: IdentifiersBody;
  reason: string;
}

export const readIdentifiersBody = { ...object, properties: { reason } } as const;
export type ReadIdentifiersBody = FromSchema<typeof readIdentifiersBody>;

/** Identifiers as they are shown, once, to the person who asked. */
export const identifiersDto = {
  ...object,
  required: ['name', 'birthDate', 'phone', 'email', 'postcode', 'recordNumber', 'revision', 'until'],
  properties: {
    name: text,
    birthDate: date,
    phone: { type: ['string', 'null'] },
    email: { type: ['string', 'null'] },
    postcode: { type: ['string', 'null'] },
    recordNumber: { type: ['string', 'null'] },
    revision: { type: 'integer' },
    /** When an urgent look ends; null for those who look after the participant. */
    until: { anyOf: [{ type: 'null' }, instant] },
  },
} as const;
export interface IdentifiersDto {
  name: string;
  birthDate: string;
  phone: string | null;
  email: string | null;
  postcode: string | null;
  recordNumber: string | null;
  revision: number;
  until: string | null;
}

export const identifiersReadingDto = {
  ...object,
  required: ['at', 'by', 'role', 'reason'],
  properties: { at: instant, by: text, role: text, reason: { type: ['string', 'null'] } },
} as const;
export type IdentifiersReadingDto = FromSchema<typeof identifiersReadingDto>;

export const confirmEligibilityBody = {
  ...object,
  required: ['criteriaMet', 'checkedOn'],
  properties: { criteriaMet: { const: true }, checkedOn: date },
} as const;
export type ConfirmEligibilityBody = FromSchema<typeof confirmEligibilityBody>;

export const withdrawParticipantBody = {
  ...object,
  required: ['reason', 'withdrawnOn', 'earlierData', 'safetyFollowUp'],
  properties: {
    reason,
    withdrawnOn: date,
    earlierData: { enum: earlierDataChoices },
    safetyFollowUp: { type: 'boolean' },
  },
} as const;
export interface WithdrawParticipantBody {
  reason: string;
  withdrawnOn: string;
  earlierData: EarlierData;
  safetyFollowUp: boolean;
}

export const sealAllocationBody = {
  ...object,
  required: ['blockSizes', 'slotsPerSite'],
  properties: {
    blockSizes: {
      type: 'array',
      minItems: 1,
      maxItems: 6,
      uniqueItems: true,
      items: { type: 'integer', minimum: 2, maximum: 24 },
    },
    slotsPerSite: { type: 'integer', minimum: 1, maximum: 500 },
  },
} as const;
export interface SealAllocationBody {
  blockSizes: number[];
  slotsPerSite: number;
}

/** Signed by the password, with a reason: an emergency opening, and asking for the unblinding. */
export const signedReasonBody = {
  ...object,
  required: ['reason', 'password'],
  properties: { reason, password },
} as const;
export type SignedReasonBody = FromSchema<typeof signedReasonBody>;
export const confirmUnblindingBody = {
  ...object,
  required: ['password'],
  properties: { password },
} as const;
export type ConfirmUnblindingBody = FromSchema<typeof confirmUnblindingBody>;

const labelled = { ...object, required: ['key', 'label'], properties: { key: text, label: text } } as const;
export interface Labelled {
  key: string;
  label: string;
}

/** What is given to a participant, period by period; for those alone who may know. */
export interface ConditionsDto {
  sequence: Labelled;
  periods: { period: number; condition: Labelled }[];
}
const conditionsProperties = {
  sequence: labelled,
  periods: {
    type: 'array',
    items: {
      ...object,
      required: ['period', 'condition'],
      properties: { period: { type: 'integer' }, condition: labelled },
    },
  },
} as const;

/** The blinded get the place and that it is filled, nothing else. */
export type AllocationOfParticipant =
  { assignedAt: string; hidden: true } | ({ assignedAt: string; hidden: false } & ConditionsDto);

export interface ParticipantDto {
  id: string;
  /** With the site, what the rules of an ability ask about. */
  studyId: string;
  code: string;
  siteId: string;
  siteCode: string;
  state: ParticipantState;
  enrolledOn: string;
  consentedOn: string | null;
  consentVersion: string | null;
  eligibleOn: string | null;
  allocation: AllocationOfParticipant | null;
  withdrawal: { on: string; earlierData: EarlierData; safetyFollowUp: boolean } | null;
  visits: { completed: number; missed: number; planned: number };
  /** That the condition was opened in an emergency, never what it was. */
  emergencyOpenings: { at: string; by: string }[];
  /** The version of the protocol that the participant follows. */
  protocolVersionId: string;
  revision: number;
}

export const participantDto = {
  ...object,
  required: [
    'id',
    'studyId',
    'code',
    'siteId',
    'siteCode',
    'state',
    'enrolledOn',
    'consentedOn',
    'consentVersion',
    'eligibleOn',
    'allocation',
    'withdrawal',
    'visits',
    'emergencyOpenings',
    'protocolVersionId',
    'revision',
  ],
  properties: {
    id: uuid,
    studyId: uuid,
    code: text,
    siteId: uuid,
    siteCode: text,
    state: { enum: participantStates },
    enrolledOn: date,
    consentedOn: optionalDate,
    consentVersion: { type: ['string', 'null'] },
    eligibleOn: optionalDate,
    allocation: {
      anyOf: [
        { type: 'null' },
        {
          ...object,
          required: ['assignedAt', 'hidden'],
          properties: { assignedAt: instant, hidden: { const: true } },
        },
        {
          ...object,
          required: ['assignedAt', 'hidden', 'sequence', 'periods'],
          properties: { assignedAt: instant, hidden: { const: false }, ...conditionsProperties },
        },
      ],
    },
    withdrawal: {
      anyOf: [
        { type: 'null' },
        {
          ...object,
          required: ['on', 'earlierData', 'safetyFollowUp'],
          properties: {
            on: date,
            earlierData: { enum: earlierDataChoices },
            safetyFollowUp: { type: 'boolean' },
          },
        },
      ],
    },
    visits: {
      ...object,
      required: ['completed', 'missed', 'planned'],
      properties: {
        completed: { type: 'integer' },
        missed: { type: 'integer' },
        planned: { type: 'integer' },
      },
    },
    emergencyOpenings: {
      type: 'array',
      items: { ...object, required: ['at', 'by'], properties: { at: instant, by: text } },
    },
    protocolVersionId: uuid,
    revision: { type: 'integer' },
  },
} as const;

interface SealedListDto {
  sealedAt: string;
  sealedBy: string;
  commitment: string;
  slots: number;
}

export interface AllocationDto {
  /** Sequences of the protocol: none before it is published; with one there is nothing to allocate. */
  sequences: number;
  sealed: SealedListDto | null;
  assigned: number;
  sites: { siteCode: string; siteName: string; enrolled: number; assigned: number }[];
}

const sealedListDto = {
  ...object,
  required: ['sealedAt', 'sealedBy', 'commitment', 'slots'],
  properties: { sealedAt: instant, sealedBy: text, commitment: text, slots: { type: 'integer' } },
} as const;

export const allocationDto = {
  ...object,
  required: ['sequences', 'sealed', 'assigned', 'sites'],
  properties: {
    sequences: { type: 'integer' },
    sealed: { anyOf: [{ type: 'null' }, sealedListDto] },
    assigned: { type: 'integer' },
    sites: {
      type: 'array',
      items: {
        ...object,
        required: ['siteCode', 'siteName', 'enrolled', 'assigned'],
        properties: {
          siteCode: text,
          siteName: text,
          enrolled: { type: 'integer' },
          assigned: { type: 'integer' },
        },
      },
    },
  },
} as const;

/** What the unblinded technician prepares for one participant in one period. */
export interface WorklistItemDto {
  participantId: string;
  code: string;
  siteCode: string;
  period: number;
  condition: Labelled;
  visits: { key: string; label: string; steps: { label: string; plannedMinute: number }[] }[];
}

export const worklistItemDto = {
  ...object,
  required: ['participantId', 'code', 'siteCode', 'period', 'condition', 'visits'],
  properties: {
    participantId: uuid,
    code: text,
    siteCode: text,
    period: { type: 'integer' },
    condition: labelled,
    visits: {
      type: 'array',
      items: {
        ...object,
        required: ['key', 'label', 'steps'],
        properties: {
          key: text,
          label: text,
          steps: {
            type: 'array',
            items: {
              ...object,
              required: ['label', 'plannedMinute'],
              properties: { label: text, plannedMinute: { type: 'number' } },
            },
          },
        },
      },
    },
  },
} as const;

/** One participant's condition, for the study physician who opened it and for nobody else. */
export interface EmergencyOpeningDto extends ConditionsDto {
  code: string;
  openedAt: string;
}
export const emergencyOpeningDto = {
  ...object,
  required: ['code', 'openedAt', 'sequence', 'periods'],
  properties: { code: text, openedAt: instant, ...conditionsProperties },
} as const;

export interface UnblindingDto {
  studyState: string;
  request: { by: string; byMe: boolean; at: string; reason: string; revision: number } | null;
  confirmed: { by: string; at: string } | null;
}
export const unblindingDto = {
  ...object,
  required: ['studyState', 'request', 'confirmed'],
  properties: {
    studyState: text,
    request: {
      anyOf: [
        { type: 'null' },
        {
          ...object,
          required: ['by', 'byMe', 'at', 'reason', 'revision'],
          properties: {
            by: text,
            byMe: { type: 'boolean' },
            at: instant,
            reason: text,
            revision: { type: 'integer' },
          },
        },
      ],
    },
    confirmed: {
      anyOf: [{ type: 'null' }, { ...object, required: ['by', 'at'], properties: { by: text, at: instant } }],
    },
  },
} as const;

/** Everything the list was made from, opened after unblinding; `verify-allocation.ts` checks it. */
export const openedAllocationDto = {
  ...object,
  required: ['commitment', 'seed', 'salt', 'strata', 'sequences', 'blockSizes', 'list'],
  properties: {
    commitment: text,
    seed: text,
    salt: text,
    strata: {
      type: 'array',
      items: { ...object, required: ['key', 'slots'], properties: { key: text, slots: { type: 'integer' } } },
    },
    sequences: { type: 'array', items: text },
    blockSizes: { type: 'array', items: { type: 'integer' } },
    list: {
      type: 'array',
      items: {
        ...object,
        required: ['stratum', 'position', 'sequence'],
        properties: { stratum: text, position: { type: 'integer' }, sequence: text },
      },
    },
  },
} as const;
