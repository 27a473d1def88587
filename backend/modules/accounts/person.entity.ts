import { defineEntity, p, type InferEntity } from '@mikro-orm/postgresql';
import { id, revision } from '#backend/database/columns.ts';
import { audited } from '#backend/database/audited.ts';

/** One account, one identified person; deactivated, never deleted or handed on (ES-05). */
export const PersonSchema = defineEntity({
  name: 'Person',
  tableName: 'person',
  indexes: [{ properties: ['name', 'id'] }],
  properties: {
    id: id(),
    /** Lower case; the sign-in name. */
    email: p.string().length(254).unique(),
    name: p.string().length(120),
    passwordHash: p.string().length(200).nullable(),
    status: p.enum(['invited', 'active', 'deactivated'] as const).default('invited'),
    /** When the person accepted that the signature binds like ink (ES-05). */
    declarationAcceptedAt: p.datetime().nullable(),
    /** Sessions carry the number they were opened under; raising it signs out everywhere. */
    sessionEpoch: p.integer().default(1),
    revision: revision(),
  },
});
export type Person = InferEntity<typeof PersonSchema>;

audited(PersonSchema, {
  subject: 'person',
  chain: 'system',
  columns: { passwordHash: 'digest', revision: 'skip' },
});
