import type { IdentifiersBody } from '#schemas/api/participants.ts';
import type { IdentityKeys } from '#backend/config/settings.ts';
import { invalidBody } from '#backend/http/problem.ts';
import type { DirectIdentifiers } from './direct-identifiers.entity.ts';
import { blindIndex, seal, unseal } from './sealing.ts';

type OptionalColumn = 'phone' | 'email' | 'postcode' | 'recordNumber';

type SealedColumns = Pick<
  DirectIdentifiers,
  'keyId' | 'blindIndex' | 'name' | 'birthDate' | 'phone' | 'email' | 'postcode' | 'recordNumber'
>;

const placeOf = (participantId: string, column: string) => ({
  table: 'direct_identifiers',
  row: participantId,
  column,
});

/** The columns of the identity store, each sealed on its own under the current key. */
export function sealedIdentifiers(
  keys: IdentityKeys,
  { id, studyId }: { id: string; studyId: string },
  identifiers: IdentifiersBody,
): SealedColumns {
  const sealed = (column: string, text: string) => seal(keys, placeOf(id, column), text.trim());
  const optional = (column: OptionalColumn) => {
    const text = identifiers[column];
    return text == null ? null : sealed(column, text);
  };
  return {
    keyId: keys.currentKeyId,
    blindIndex: blindIndex(keys, { studyId, name: identifiers.name, birthDate: identifiers.birthDate }),
    name: sealed('name', identifiers.name),
    birthDate: sealed('birthDate', identifiers.birthDate),
    phone: optional('phone'),
    email: optional('email'),
    postcode: optional('postcode'),
    recordNumber: optional('recordNumber'),
  };
}

/** Opens a row with the key that it names. */
export function openIdentifiers(
  keys: IdentityKeys,
  row: DirectIdentifiers,
): { name: string; birthDate: string } & Record<OptionalColumn, string | null> {
  const opened = (column: string, sealed: Uint8Array) =>
    unseal(keys, row.keyId, placeOf(row.participantId, column), sealed);
  const optional = (column: OptionalColumn) => {
    const sealed = row[column];
    return sealed == null ? null : opened(column, sealed);
  };
  return {
    name: opened('name', row.name),
    birthDate: opened('birthDate', row.birthDate),
    phone: optional('phone'),
    email: optional('email'),
    postcode: optional('postcode'),
    recordNumber: optional('recordNumber'),
  };
}

const longestLife = 120;

/** A birth date that nobody taking part can have is a slip. @throws Problem 422 at `pointer`/birthDate */
export function assertPlausible({ birthDate }: IdentifiersBody, pointer = '/identifiers'): void {
  const today = new Date().toISOString().slice(0, 10);
  const oldest = `${Number(today.slice(0, 4)) - longestLife}${today.slice(4)}`;
  if (birthDate < today && birthDate > oldest) return;
  throw invalidBody([
    { pointer: `${pointer}/birthDate`, detail: 'lies in the future, or too far back; correct the year' },
  ]);
}
