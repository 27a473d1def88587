import { createCipheriv, createDecipheriv, createHmac, randomBytes } from 'node:crypto';
import type { IdentityKeys } from '#backend/config/settings.ts';

/** Where a sealed text belongs; moved to another row or column it does not open any more. */
export interface Place {
  table: string;
  row: string;
  column: string;
}

const nonceBytes = 12;
const tagBytes = 16;

const boundTo = ({ table, row, column }: Place, keyId: string): Buffer =>
  Buffer.from(JSON.stringify([keyId, table, row, column]));

/**
 * Seals a text under the current key: AES-256-GCM, a random nonce each time, bound to its place.
 * Form: nonce (12 bytes) ‖ ciphertext ‖ tag (16 bytes). The key's id is kept by the caller, in the row.
 */
export function seal(keys: IdentityKeys, place: Place, text: string): Buffer {
  const nonce = randomBytes(nonceBytes);
  const cipher = createCipheriv('aes-256-gcm', keyOf(keys, keys.currentKeyId), nonce);
  cipher.setAAD(boundTo(place, keys.currentKeyId));
  return Buffer.concat([nonce, cipher.update(text, 'utf8'), cipher.final(), cipher.getAuthTag()]);
}

/**
 * Opens what was sealed under a key, the current or an older one.
 * @throws when it was changed, moved to another place, or sealed under another key; never says what it held
 */
export function unseal(keys: IdentityKeys, keyId: string, place: Place, sealed: Uint8Array): string {
  const nonce = sealed.subarray(0, nonceBytes);
  const end = sealed.length - tagBytes;
  const key = keyOf(keys, keyId);
  try {
    const decipher = createDecipheriv('aes-256-gcm', key, nonce, { authTagLength: tagBytes });
    decipher.setAAD(boundTo(place, keyId));
    decipher.setAuthTag(sealed.subarray(end));
    return Buffer.concat([decipher.update(sealed.subarray(nonceBytes, end)), decipher.final()]).toString(
      'utf8',
    );
  } catch (cause) {
    throw new Error(`What is sealed in ${place.table}/${place.column} does not open with its key.`, {
      cause,
    });
  }
}

/** Like `seal`, for what lies in one column alone: the key's id goes before it. */
export function sealWithKeyId(keys: IdentityKeys, place: Place, text: string): Buffer {
  const id = Buffer.from(keys.currentKeyId);
  return Buffer.concat([Buffer.of(id.length), id, seal(keys, place, text)]);
}

export function unsealWithKeyId(keys: IdentityKeys, place: Place, sealed: Uint8Array): string {
  const end = 1 + (sealed[0] ?? 0);
  const keyId = Buffer.from(sealed.subarray(1, end)).toString('utf8');
  return unseal(keys, keyId, place, sealed.subarray(end));
}

/**
 * Keyed digest of name and birth date within a study: tells whether someone is enrolled already without reading
 * anyone, and tells nothing without the key. Accents, case, order of the names and punctuation do not count.
 */
export function blindIndex(
  { indexKey }: IdentityKeys,
  person: { studyId: string; name: string; birthDate: string },
): Buffer {
  const text = JSON.stringify([person.studyId, comparable(person.name), person.birthDate]);
  return createHmac('sha256', indexKey).update(text).digest();
}

/** Keyed digest of a request that holds identifiers: a plain one could be guessed from a list of names. */
export const keyedDigest = ({ indexKey }: IdentityKeys, text: string): string =>
  createHmac('sha256', indexKey).update(`request ${text}`).digest('hex');

function comparable(name: string): string {
  const plain = name
    .normalize('NFKD')
    .replaceAll(/[\p{M}'’ʼ`.]/gu, '')
    .toLowerCase();
  return plain
    .split(/[^\p{L}\p{N}]+/u)
    .filter(Boolean)
    .sort()
    .join(' ');
}

function keyOf({ keys }: IdentityKeys, keyId: string): Buffer {
  const key = keys[keyId];
  if (key === undefined) throw new Error(`IDENTITY_KEY does not hold the key "${keyId}", which sealed this.`);
  return key;
}
