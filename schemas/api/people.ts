import type { FromSchema } from 'json-schema-to-ts';
import { roles, type Role } from '../vocabulary/roles.ts';
import { reasonBody } from './accounts.ts';

const email = { type: 'string', format: 'email', maxLength: 254 } as const;
const uuid = { type: 'string', format: 'uuid' } as const;
const object = { type: 'object', additionalProperties: false } as const;
const password = { type: 'string', maxLength: 1024 } as const;
/** 256 random bits in base64url. */
const token = { type: 'string', pattern: '^[A-Za-z0-9_-]{43}$' } as const;
const siteIds = {
  anyOf: [{ type: 'null' }, { type: 'array', items: uuid, minItems: 1, maxItems: 200, uniqueItems: true }],
} as const;
const { reason } = reasonBody.properties;

export const personStates = ['invited', 'active', 'deactivated'] as const;
const membershipStates = ['active', 'revoked'] as const;

export const invitePersonBody = {
  ...object,
  required: ['email', 'name'],
  properties: {
    email,
    name: { type: 'string', minLength: 1, maxLength: 120, pattern: '^(?=.*\\S)[^\\u0000-\\u001f\\u007f]+$' },
  },
} as const;
export type InvitePersonBody = FromSchema<typeof invitePersonBody>;

export const grantMembershipBody = {
  ...object,
  required: ['personId', 'studyCode', 'role', 'siteIds', 'unblinded', 'reason'],
  properties: {
    personId: uuid,
    /** Null for an administrator, who belongs to no study. */
    studyCode: { type: ['string', 'null'], maxLength: 40 },
    role: { enum: roles },
    /** Null means all sites. */
    siteIds,
    unblinded: { type: 'boolean' },
    reason,
  },
} as const;
export interface GrantMembershipBody {
  personId: string;
  studyCode: string | null;
  role: Role;
  siteIds: string[] | null;
  unblinded: boolean;
  reason: string;
}

export const changeMembershipBody = {
  ...object,
  required: ['siteIds', 'unblinded', 'reason'],
  properties: { siteIds, unblinded: { type: 'boolean' }, reason },
} as const;
export type ChangeMembershipBody = Pick<GrantMembershipBody, 'siteIds' | 'unblinded' | 'reason'>;

export const tokenBody = { ...object, required: ['token'], properties: { token } } as const;
export type TokenBody = FromSchema<typeof tokenBody>;

export const acceptInvitationBody = {
  ...object,
  required: ['token', 'password', 'acceptDeclaration'],
  properties: { token, password, acceptDeclaration: { const: true } },
} as const;
export type AcceptInvitationBody = FromSchema<typeof acceptInvitationBody>;

export const passwordResetBody = { ...object, required: ['email'], properties: { email } } as const;
export type PasswordResetBody = FromSchema<typeof passwordResetBody>;

export const newPasswordBody = {
  ...object,
  required: ['token', 'password'],
  properties: { token, password },
} as const;
export type NewPasswordBody = FromSchema<typeof newPasswordBody>;

export const invitedPersonDto = {
  ...object,
  required: ['name', 'email'],
  properties: { name: { type: 'string' }, email: { type: 'string' } },
} as const;
export type InvitedPersonDto = FromSchema<typeof invitedPersonDto>;

const membershipProperties = {
  id: uuid,
  role: { enum: roles },
  siteIds: { anyOf: [{ type: 'null' }, { type: 'array', items: uuid }] },
  /** Codes of the sites, in the order of `siteIds`. */
  siteCodes: { anyOf: [{ type: 'null' }, { type: 'array', items: { type: 'string' } }] },
  unblinded: { type: 'boolean' },
  status: { enum: membershipStates },
  revision: { type: 'integer' },
} as const;

interface MembershipFields {
  id: string;
  role: Role;
  siteIds: string[] | null;
  siteCodes: string[] | null;
  unblinded: boolean;
  status: (typeof membershipStates)[number];
  revision: number;
}

/** A membership under the person who holds it. */
export const heldMembershipDto = {
  ...object,
  required: [...(Object.keys(membershipProperties) as (keyof MembershipFields)[]), 'studyCode', 'studyName'],
  properties: {
    ...membershipProperties,
    studyCode: { type: ['string', 'null'] },
    studyName: { type: ['string', 'null'] },
  },
} as const;
export interface HeldMembershipDto extends MembershipFields {
  studyCode: string | null;
  studyName: string | null;
}

/** A membership under its study. */
export const memberDto = {
  ...object,
  required: [
    ...(Object.keys(membershipProperties) as (keyof MembershipFields)[]),
    'personId',
    'name',
    'email',
    'personStatus',
  ],
  properties: {
    ...membershipProperties,
    personId: uuid,
    name: { type: 'string' },
    email: { type: 'string' },
    personStatus: { enum: personStates },
  },
} as const;
export interface MemberDto extends MembershipFields {
  personId: string;
  name: string;
  email: string;
  personStatus: (typeof personStates)[number];
}

export const personDto = {
  ...object,
  required: ['id', 'name', 'email', 'status', 'declarationAcceptedAt', 'revision', 'memberships'],
  properties: {
    id: uuid,
    name: { type: 'string' },
    email: { type: 'string' },
    status: { enum: personStates },
    declarationAcceptedAt: { type: ['string', 'null'] },
    revision: { type: 'integer' },
    memberships: { type: 'array', items: heldMembershipDto },
  },
} as const;
export interface PersonDto {
  id: string;
  name: string;
  email: string;
  status: (typeof personStates)[number];
  declarationAcceptedAt: string | null;
  revision: number;
  memberships: HeldMembershipDto[];
}
