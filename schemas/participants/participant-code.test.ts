import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { checkCharacter } from './check-character.ts';
import { parseParticipantCode, participantCode } from './participant-code.ts';
import { nextParticipantCode, whatCodeTells } from './telling-code.ts';

const siteLetters = fc.stringMatching(/^[A-Z]{2}$/);
const number = fc.integer({ min: 1, max: 99_999 });
const givenCode = fc
  .tuple(siteLetters, number)
  .map(([letters, n]) => participantCode(letters, n))
  .filter((code) => code !== null);

const readAs = (character: string) => character.replace('O', '0').replace('I', '1');

describe('the check character', () => {
  it('is that of the published worked example', () => {
    // JPAC, Guidelines for the Blood Transfusion Services in the UK (Red Book), Annex 2: ISO 7064 modulus 37,2 of
    // donation number G123 498 654 321: weighted sum 148354, checksum 17, character H.
    expect(checkCharacter('G123498654321')).toBe('H');
  });

  it('satisfies the defining congruence: the weighted sum with its check character is 1 modulo 37', () => {
    // ISO/IEC 7064, pure systems: sum of a(i)·2^(i-1) ≡ 1 (mod 37), counted from the right.
    const values = '0123456789ABCDEFGHIJKLMNOPQRSTUVWXYZ*';
    fc.assert(
      fc.property(fc.stringMatching(/^[0-9A-Z]{1,12}$/), (text) => {
        const sum = [...(text + checkCharacter(text))]
          .reverse()
          .reduce((total, character, at) => total + BigInt(values.indexOf(character)) * 2n ** BigInt(at), 0n);
        return sum % 37n === 1n;
      }),
    );
  });

  it('refuses what is neither digit nor capital letter', () => {
    expect(() => checkCharacter('up014')).toThrow(RangeError);
    expect(() => checkCharacter('UP*')).toThrow(RangeError);
  });
});

describe('a participant code', () => {
  it('is site letters, running number and check character', () => {
    // By hand: U=30 P=25 0 1 4 at weights 2^5..2^1: 960+400+0+4+8 = 1372 = 37·37+3; 38-3 = 35 = Z.
    expect(participantCode('UP', 14)).toBe('UP-014-Z');
    expect(parseParticipantCode('UP-014-Z')).toEqual({ code: 'UP-014-Z', siteLetters: 'UP', number: 14 });
  });

  it('has no check character that is read as another', () => {
    fc.assert(fc.property(givenCode, (code) => !'01IO*'.includes(code.at(-1)!)));
    // By hand: U P 0 0 7 weighs 960+400+0+0+14 = 1374 = 37·37+5; 38-5 = 33 = X; a number without a code: 5.
    expect(participantCode('UP', 7)).toBe('UP-007-X');
  });

  it('passes over only the few numbers whose check character could be mistaken', () => {
    const without = Array.from({ length: 9999 }, (_, at) => participantCode('UP', at + 1)).filter(
      (c) => c === null,
    );
    expect(without.length / 9999).toBeCloseTo(5 / 37, 2);
  });

  // proves CP-04
  it('is not valid with two of its characters exchanged', () => {
    fc.assert(
      fc.property(givenCode, fc.nat(), fc.nat(), (code, first, second) => {
        const plain = [...code.replaceAll('-', '')];
        const [a, b] = [first % plain.length, second % plain.length];
        // O where only a digit can stand is read as 0, so these two exchange nothing.
        fc.pre(readAs(plain[a]!) !== readAs(plain[b]!));
        [plain[a], plain[b]] = [plain[b]!, plain[a]!];
        return parseParticipantCode(plain.join('')) === null;
      }),
      { numRuns: 5000 },
    );
    expect(parseParticipantCode('UP-041-Z')).toBeNull();
  });

  it('is not valid with one character changed', () => {
    fc.assert(
      fc.property(
        givenCode,
        fc.nat(),
        fc.constantFrom(...'23456789ABCDEFGHJKLMNPQRSTUVWXYZ'),
        (code, at, other) => {
          const plain = [...code.replaceAll('-', '')];
          const place = at % plain.length;
          fc.pre(readAs(plain[place]!) !== other);
          plain[place] = other;
          return parseParticipantCode(plain.join('')) === null;
        },
      ),
      { numRuns: 5000 },
    );
  });

  it('is read as people type it', () => {
    for (const typed of ['up014z', 'UP 014 Z', 'UP–014–Z', 'UP-O14-Z', ' up-014-z ']) {
      expect(parseParticipantCode(typed)?.code).toBe('UP-014-Z');
    }
    fc.assert(fc.property(givenCode, (code) => parseParticipantCode(code)?.code === code));
  });

  it('is not read from anything else', () => {
    for (const typed of ['', 'UP', 'UP-14-Z', 'UP-0014-Z', 'UP-000-4', 'U-014-Z', 'UP-014-*', 'UPS-014-Z']) {
      expect(parseParticipantCode(typed)).toBeNull();
    }
  });

  it('refuses letters and numbers that no site has', () => {
    expect(() => participantCode('up', 1)).toThrow(RangeError);
    expect(() => participantCode('UP', 0)).toThrow(RangeError);
    expect(() => participantCode('UP', 1.5)).toThrow(RangeError);
  });
});

describe('a code that tells of a person', () => {
  const person = { name: 'Tove Okoro-Lind', birthDate: '1987-03-14', recordNumber: 'R-20-552' };

  // proves CP-04
  it.each([
    ['UP-014-Z', 'birth date'],
    ['UP-003-4', 'birth date'],
    ['UP-987-X', 'birth date'],
    ['UP-119-T', null],
    ['UO-119-T', 'initials'],
    ['UL-119-T', 'initials'],
    ['UP-119-L', null],
    ['TO-119-L', 'initials'],
    ['TO-119-A', null],
    ['UP-552-A', 'record number'],
    ['UP-101-4', 'birth date'],
  ] as const)('%s tells: %s', (code, tells) => {
    expect(whatCodeTells(code, person)).toBe(tells);
  });

  it('is passed over for that person and given to the next', () => {
    const other = { name: 'Ann Bee', birthDate: '1950-11-22' };
    const own = nextParticipantCode('UP', new Set([1, 2]), person);
    expect(whatCodeTells(own, person)).toBeNull();
    // By hand: 960+400+8 = 1368 = 37·36+36; 38-36 = 2. And 960+400+6 = 1366 = 37·36+34; 38-34 = 4.
    expect(own).toBe('UP-004-2');
    expect(nextParticipantCode('UP', new Set([1, 2, 4]), other)).toBe('UP-003-4');
  });

  it('is never handed out, whoever is enrolled', () => {
    const anyone = fc.record({
      name: fc.stringMatching(/^[A-Z][a-z]{2,8}( [A-Z][a-z]{2,8}){1,2}$/),
      birthDate: fc
        .date({ min: new Date('1925-01-01'), max: new Date('2008-12-31'), noInvalidDate: true })
        .map((d) => d.toISOString().slice(0, 10)),
      recordNumber: fc.stringMatching(/^\d{5,8}$/),
    });
    fc.assert(
      fc.property(fc.array(anyone, { minLength: 1, maxLength: 40 }), siteLetters, (people, letters) => {
        const taken = new Set<number>();
        return people.every((one) => {
          const code = nextParticipantCode(letters, taken, one);
          taken.add(parseParticipantCode(code)!.number);
          return whatCodeTells(code, one) === null;
        });
      }),
    );
  });
});
