import canonicalizeModule from 'canonicalize';
import { createHash } from 'node:crypto';

const canonicalize = canonicalizeModule;

/** RFC 8785 form of a JSON value; refuses what JSON cannot say (NaN, undefined at the top). */
export function canonicalForm(value: unknown): string {
  const text = canonicalize(value);
  if (text === undefined) throw new TypeError('Only JSON values have a canonical form.');
  return text;
}

/** SHA-256 as lower-case hex. */
export const sha256 = (data: string | Uint8Array): string => createHash('sha256').update(data).digest('hex');

/** SHA-256 over the RFC 8785 form: the hash of a published version, a report, a content. */
export const canonicalHash = (value: unknown): string => sha256(canonicalForm(value));
