import type { FromSchema } from 'json-schema-to-ts';
import { roles } from '../vocabulary/roles.ts';

const uuid = { type: 'string', format: 'uuid' } as const;
const object = { type: 'object', additionalProperties: false } as const;

export const signInBody = {
  ...object,
  required: ['email', 'password'],
  properties: { email: { type: 'string', maxLength: 254 }, password: { type: 'string', maxLength: 1024 } },
} as const;

export const actingBody = {
  ...object,
  required: ['membershipId'],
  properties: { membershipId: uuid },
} as const;
export type ActingBody = FromSchema<typeof actingBody>;

const membershipDto = {
  ...object,
  required: ['id', 'studyCode', 'studyName', 'role', 'siteIds', 'unblinded'],
  properties: {
    id: uuid,
    studyCode: { type: ['string', 'null'] },
    studyName: { type: ['string', 'null'] },
    role: { enum: roles },
    siteIds: { anyOf: [{ type: 'null' }, { type: 'array', items: uuid }] },
    unblinded: { type: 'boolean' },
  },
} as const;
export type MembershipDto = FromSchema<typeof membershipDto>;

export const sessionDto = {
  ...object,
  required: ['person', 'memberships', 'acting', 'rules', 'deviceKey'],
  properties: {
    person: {
      ...object,
      required: ['id', 'name', 'email'],
      properties: { id: uuid, name: { type: 'string' }, email: { type: 'string' } },
    },
    memberships: { type: 'array', items: membershipDto },
    acting: {
      anyOf: [
        { type: 'null' },
        {
          ...object,
          required: ['membershipId', 'studyCode', 'studyName', 'studyState', 'role', 'sites', 'unblinded'],
          properties: {
            membershipId: uuid,
            studyCode: { type: ['string', 'null'] },
            studyName: { type: ['string', 'null'] },
            studyState: { type: ['string', 'null'] },
            role: { enum: roles },
            /** The sites one may act at, all of the study's when not limited. */
            sites: {
              type: 'array',
              items: {
                ...object,
                required: ['id', 'code', 'name', 'timeZone'],
                properties: {
                  id: uuid,
                  code: { type: 'string' },
                  name: { type: 'string' },
                  timeZone: { type: 'string' },
                },
              },
            },
            unblinded: { type: 'boolean' },
          },
        },
      ],
    },
    /** Packed rules of the ability acted with, the same that the server asks. */
    rules: { type: 'array' },
    /** Base64 of 32 bytes, this person's alone: seals what waits on the device (WS-13). */
    deviceKey: { type: 'string' },
  },
} as const;

export interface SessionDto {
  person: { id: string; name: string; email: string };
  memberships: MembershipDto[];
  acting: {
    membershipId: string;
    studyCode: string | null;
    studyName: string | null;
    studyState: string | null;
    role: (typeof roles)[number];
    sites: { id: string; code: string; name: string; timeZone: string }[];
    unblinded: boolean;
  } | null;
  rules: unknown[];
  /** Base64 of 32 bytes that only this person is given: seals what waits on the device. */
  deviceKey: string;
}

export const reasonBody = {
  ...object,
  required: ['reason'],
  properties: { reason: { type: 'string', minLength: 3, maxLength: 2000, pattern: '\\S.*\\S' } },
} as const;
export type ReasonBody = FromSchema<typeof reasonBody>;

export const statusDto = {
  ...object,
  required: ['version', 'demo'],
  properties: {
    version: { type: 'string' },
    demo: {
      anyOf: [
        { type: 'null' },
        {
          ...object,
          required: ['accounts'],
          properties: {
            accounts: {
              type: 'array',
              items: {
                ...object,
                required: ['email', 'password', 'name', 'roles'],
                properties: {
                  email: { type: 'string' },
                  password: { type: 'string' },
                  name: { type: 'string' },
                  roles: { type: 'string' },
                },
              },
            },
          },
        },
      ],
    },
  },
} as const;
