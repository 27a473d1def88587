import { checkCharacter } from './check-character.ts';

/** A participant's code, taken apart. */
export interface ParticipantCode {
  /** As it is written everywhere: `UP-014-R`. */
  code: string;
  siteLetters: string;
  number: number;
}

/** Read as one another, or not a character of file names: never the check character. */
const mistakable = ['0', 'O', '1', 'I', '*'];
const largestNumber = 999_999;

/**
 * The code of a site's running number; null where its check character could be mistaken for another:
 * such a number is passed over, for everybody and for good, and anyone can compute which ones they are.
 *
 * @param siteLetters two capital letters
 * @param number 1 to 999 999
 */
export function participantCode(siteLetters: string, number: number): string | null {
  if (!/^[A-Z]{2}$/.test(siteLetters)) throw new RangeError('A site has two capital letters.');
  if (!Number.isInteger(number) || number < 1 || number > largestNumber) {
    throw new RangeError(`A running number is a whole number from 1 to ${largestNumber}.`);
  }
  const digits = String(number).padStart(3, '0');
  const check = checkCharacter(siteLetters + digits);
  return mistakable.includes(check) ? null : `${siteLetters}-${digits}-${check}`;
}

/**
 * Reads a code as people type it: small letters, without hyphens, O for 0 where only a digit can stand.
 * @returns null when it is not a valid code, two digits exchanged for instance
 */
export function parseParticipantCode(typed: string): ParticipantCode | null {
  const plain = typed.toUpperCase().replaceAll(/[\s‐-―-]/gu, '');
  const parts = /^([A-Z01]{2})([0-9OI]{3,6})([2-9A-HJ-NP-Z])$/.exec(plain);
  if (parts === null) return null;
  const siteLetters = parts[1]!.replaceAll('0', 'O').replaceAll('1', 'I');
  const number = Number(parts[2]!.replaceAll('O', '0').replaceAll('I', '1'));
  const code = number === 0 ? null : participantCode(siteLetters, number);
  if (code === null || code.replaceAll('-', '') !== siteLetters + padded(number) + parts[3]!) return null;
  // A number written with more zeros than it has is another text, and was never handed out.
  return parts[2]!.length === padded(number).length ? { code, siteLetters, number } : null;
}

const padded = (number: number): string => String(number).padStart(3, '0');
