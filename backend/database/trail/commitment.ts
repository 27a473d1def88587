import { createHash, randomBytes } from 'node:crypto';
import { canonicalForm } from './canonical.ts';

/** 256 random bits: a haematocrit with 300 possible values cannot be guessed from its commitment. */
export const newSalt = (): Buffer => randomBytes(32);

/**
 * Commitment to a value: SHA-256(salt ‖ RFC 8785 value ‖ 0x00 ‖ written), hex.
 * The zero byte keeps the two texts apart; neither contains one.
 */
export function commitmentOf(salt: Uint8Array, value: unknown, written: string | null): string {
  return createHash('sha256')
    .update(salt)
    .update(canonicalForm(value))
    .update(Uint8Array.of(0))
    .update(written ?? '')
    .digest('hex');
}
