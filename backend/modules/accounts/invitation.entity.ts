import { defineEntity, p, type InferEntity } from '@mikro-orm/postgresql';
import { id } from '#backend/database/columns.ts';
import { audited } from '#backend/database/audited.ts';
import { PersonSchema } from './person.entity.ts';

/** A one-time link that sets a password: 256 random bits, kept hashed, short-lived (EM-03). */
export const InvitationSchema = defineEntity({
  name: 'Invitation',
  tableName: 'invitation',
  properties: {
    id: id(),
    personId: () => p.manyToOne(PersonSchema).mapToPk().fieldName('person_id'),
    purpose: p.enum(['invitation', 'password-reset'] as const),
    tokenHash: p.string().length(64).unique(),
    expiresAt: p.datetime(),
    usedAt: p.datetime().nullable(),
  },
});
export type Invitation = InferEntity<typeof InvitationSchema>;

audited(InvitationSchema, { subject: 'invitation', chain: 'system', columns: { tokenHash: 'skip' } });
