import { participantCode } from './participant-code.ts';

/** What a code must not tell of (CP-04). */
export interface PersonFacts {
  name: string;
  /** `YYYY-MM-DD` */
  birthDate: string;
  recordNumber?: string | null;
}

/**
 * What a code would tell of this person; null when it tells nothing.
 * The two letters of a site are the same for all its participants and tell nothing of one.
 */
export function whatCodeTells(
  code: string,
  person: PersonFacts,
): 'initials' | 'birth date' | 'record number' | null {
  const plain = code.replaceAll('-', '');
  const letters = plain.replaceAll(/[^A-Z]/g, '');
  const digits = plain.replaceAll(/\D/g, '');
  const check = plain.at(-1)!;
  const withCheck = /[A-Z]/.test(check) ? letters.slice(letters.length - 3) : '';
  if (initialsOf(person.name).some((initials) => withCheck.endsWith(initials))) return 'initials';
  if (datePartsOf(person.birthDate).some((part) => digits.includes(part))) return 'birth date';
  const runningNumber = plain.slice(2, -1);
  if (person.recordNumber?.replaceAll(/\D/g, '').endsWith(runningNumber)) return 'record number';
  return null;
}

/**
 * The lowest code that is free and tells nothing of the person. A number passed over for one person is the
 * next person's, so the numbers of a site have no gap but those that have no code at all.
 */
export function nextParticipantCode(
  siteLetters: string,
  taken: ReadonlySet<number>,
  person: PersonFacts,
): string {
  for (let number = 1; ; number += 1) {
    const code = taken.has(number) ? null : participantCode(siteLetters, number);
    if (code !== null && whatCodeTells(code, person) === null) return code;
  }
}

/** `Tove Okoro-Lind` → TOL, TL, LT and TO, OT: in either order, with and without the parts between. */
function initialsOf(name: string): string[] {
  const words = name
    .normalize('NFKD')
    .toUpperCase()
    .split(/[^\p{L}\p{M}]+/u);
  const letters = words.map((word) => word.charAt(0)).filter((letter) => /[A-Z]/.test(letter));
  const pairs = letters.flatMap((one, at) =>
    letters.filter((_, other) => other !== at).map((two) => one + two),
  );
  return [letters.join(''), ...pairs].filter((initials) => initials.length > 1);
}

function datePartsOf(birthDate: string): string[] {
  const [year = '', month = '', day = ''] = birthDate.split('-');
  return [year, year.slice(-2), month, day].filter((part) => part.length > 1);
}
