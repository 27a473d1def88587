import type { FromSchema } from 'json-schema-to-ts';
import { studyStates } from '../vocabulary/states.ts';
import { reasonBody } from './accounts.ts';

const uuid = { type: 'string', format: 'uuid' } as const;
const object = { type: 'object', additionalProperties: false } as const;
const line = (maxLength: number) =>
  ({ type: 'string', minLength: 1, maxLength, pattern: '^(?=.*\\S)[^\\u0000-\\u001f\\u007f]+$' }) as const;
const { reason } = reasonBody.properties;
const timeZone = { type: 'string', minLength: 1, maxLength: 60 } as const;

export const createStudyBody = {
  ...object,
  required: ['code', 'name', 'title'],
  properties: {
    code: { type: 'string', pattern: '^[a-z][a-z0-9-]{2,39}$' },
    name: line(80),
    title: line(300),
  },
} as const;
export type CreateStudyBody = FromSchema<typeof createStudyBody>;

export const renameStudyBody = {
  ...object,
  required: ['name', 'title', 'reason'],
  properties: { name: line(80), title: line(300), reason },
} as const;
export type RenameStudyBody = FromSchema<typeof renameStudyBody>;

export const addSiteBody = {
  ...object,
  required: ['code', 'name', 'timeZone'],
  properties: { code: { type: 'string', pattern: '^[A-Z]{2}$' }, name: line(80), timeZone },
} as const;
export type AddSiteBody = FromSchema<typeof addSiteBody>;

export const changeSiteBody = {
  ...object,
  required: ['name', 'timeZone', 'reason'],
  properties: { name: line(80), timeZone, reason },
} as const;
export type ChangeSiteBody = FromSchema<typeof changeSiteBody>;

export const siteDto = {
  ...object,
  required: ['id', 'code', 'name', 'timeZone', 'revision'],
  properties: {
    id: uuid,
    code: { type: 'string' },
    name: { type: 'string' },
    timeZone: { type: 'string' },
    revision: { type: 'integer' },
  },
} as const;
export type SiteDto = FromSchema<typeof siteDto>;

export const studyDto = {
  ...object,
  required: ['id', 'code', 'name', 'title', 'state', 'plannedParticipants', 'revision', 'sites'],
  properties: {
    id: uuid,
    code: { type: 'string' },
    name: { type: 'string' },
    title: { type: 'string' },
    state: { enum: studyStates },
    /** As the published protocol says; 0 before there is one. */
    plannedParticipants: { type: 'integer' },
    revision: { type: 'integer' },
    sites: { type: 'array', items: siteDto },
  },
} as const;
export type StudyDto = FromSchema<typeof studyDto>;
