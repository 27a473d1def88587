import { hash, verify } from '@node-rs/argon2';
import { Problem } from '#backend/http/problem.ts';

/** Argon2id, 19 MiB, two passes, one lane (WS-02). */
const cost = { memoryCost: 19_456, timeCost: 2, parallelism: 1 } as const;

const minimumLength = 15;

/** Refuses what is too short or too easily guessed, and says why; never composition rules (WS-01). */
export function assertGoodPassword(password: string, facts: { email: string; name: string }): void {
  const characters = [...password.normalize('NFC')].length;
  if (characters < minimumLength) {
    throw tooWeak(`Use at least ${minimumLength} characters; a sentence is good.`);
  }
  if (new Set(password).size < 5) throw tooWeak('Use more than a few different characters.');
  const own = [facts.email.split('@')[0] ?? '', ...facts.name.split(/\s+/)].map((part) => part.toLowerCase());
  const words = [...commonWords, ...own.filter((part) => part.length > 3)];
  const letters = password.toLowerCase().replaceAll(/[^\p{L}]/gu, '');
  const left = words.reduce((text, word) => text.replaceAll(word, ''), letters);
  if (left.length < 4 && left !== letters) {
    throw tooWeak('It is made of words that are guessed first; choose others.');
  }
}

const commonWords = [
  'password',
  'passwort',
  'qwertyuiop',
  'qwerty',
  'letmein',
  'welcome',
  'iloveyou',
  'administrator',
  'admin',
  'vesselry',
  'vascular',
  'forearm',
  'haematocrit',
];

const tooWeak = (detail: string): Problem =>
  new Problem(422, 'password-too-weak', detail, [{ pointer: '/password', detail }]);

/** The PHC string to keep. */
export const hashPassword = (password: string): Promise<string> => hash(password.normalize('NFC'), cost);

/** A hash to compare with when there is no account: both answers take the same time (EM-04). */
const nobodysHash = hashPassword('nobody has this password, and nobody ever will');

/** Whether the password is right; spends the same time when there is no hash to compare with. */
export async function passwordMatches(stored: string | null | undefined, password: string): Promise<boolean> {
  const matches = await verify(stored ?? (await nobodysHash), password.normalize('NFC'));
  return matches && stored != null;
}
