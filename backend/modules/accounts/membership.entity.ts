import { defineEntity, p, type InferEntity } from '@mikro-orm/postgresql';
import { roles } from '#schemas/vocabulary/roles.ts';
import { id, oneOf, revision } from '#backend/database/columns.ts';
import { audited } from '#backend/database/audited.ts';
import { StudySchema } from '../studies/study.entity.ts';
import { PersonSchema } from './person.entity.ts';

/** Person + study + role + sites + unblinded: what someone may be in a study (AC-01). */
export const MembershipSchema = defineEntity({
  name: 'Membership',
  tableName: 'membership',
  indexes: [{ properties: ['studyId'] }, { properties: ['personId'] }],
  properties: {
    id: id(),
    personId: () => p.manyToOne(PersonSchema).mapToPk().fieldName('person_id'),
    /** Null for the administrator, who belongs to no study. */
    studyId: () => p.manyToOne(StudySchema).mapToPk().fieldName('study_id').nullable(),
    role: oneOf(roles),
    /** Null means all sites. */
    siteIds: p.array().$type<string[]>().columnType('uuid[]').nullable(),
    unblinded: p.boolean().default(false),
    status: p.enum(['active', 'revoked'] as const).default('active'),
    revision: revision(),
  },
});
export type Membership = InferEntity<typeof MembershipSchema>;

audited(MembershipSchema, { subject: 'membership', chain: 'study-or-system', columns: { revision: 'skip' } });
