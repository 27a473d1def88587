import { defineEntity, p, type InferEntity } from '@mikro-orm/postgresql';
import { revision } from '#backend/database/columns.ts';
import { audited } from '#backend/database/audited.ts';

/** Direct identifiers, each column sealed on its own; a dump of this table tells nothing (CP-05). */
export const DirectIdentifiersSchema = defineEntity({
  name: 'DirectIdentifiers',
  tableName: 'direct_identifiers',
  schema: 'identity',
  uniques: [{ properties: ['studyId', 'blindIndex'] }],
  properties: {
    participantId: p.uuid().primary(),
    studyId: p.uuid(),
    keyId: p.string().length(40),
    name: p.blob(),
    birthDate: p.blob(),
    phone: p.blob().nullable(),
    email: p.blob().nullable(),
    postcode: p.blob().nullable(),
    recordNumber: p.blob().nullable(),
    /** Keyed digest of name and birth date: "already enrolled?" without reading anyone. */
    blindIndex: p.blob(),
    revision: revision(),
  },
});
export type DirectIdentifiers = InferEntity<typeof DirectIdentifiersSchema>;
audited(DirectIdentifiersSchema, {
  subject: 'direct-identifiers',
  chain: 'study',
  // The trail says that an identifier was written, never what it was, not even as a commitment.
  columns: {
    name: 'presence',
    birthDate: 'presence',
    phone: 'presence',
    email: 'presence',
    postcode: 'presence',
    recordNumber: 'presence',
    blindIndex: 'skip',
    revision: 'skip',
  },
});
