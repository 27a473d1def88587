import { createHash } from 'node:crypto';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { verifyAllocation } from '#schemas/participants/verify-allocation.ts';
import { listCommitment, makeAllocationList, type ListMaking } from './allocation-list.ts';

const seedOf = (number: number): string => createHash('sha256').update(`seed ${number}`).digest('hex');
const crossover = {
  sequences: ['AB', 'BA'],
  blockSizes: [2, 4, 6],
  strata: [
    { key: 'TN', slots: 12 },
    { key: 'UP', slots: 13 },
  ],
};
const madeWith = (number: number, other: Partial<ListMaking> = {}) =>
  makeAllocationList({ ...crossover, seed: seedOf(number), ...other });

const making = fc.record({
  seed: fc.stringMatching(/^[0-9a-f]{64}$/),
  strata: fc.uniqueArray(
    fc.record({ key: fc.stringMatching(/^[A-Z]{2}$/), slots: fc.integer({ min: 1, max: 40 }) }),
    { minLength: 1, maxLength: 4, selector: ({ key }) => key },
  ),
  sequences: fc.constantFrom(['AB', 'BA'], ['A', 'B', 'C']),
  blockSizes: fc.constantFrom([6], [6, 12]),
});

describe('an allocation list', () => {
  it('is what a person gets who follows its description by hand', () => {
    // Seed 00…02. openssl dgst -sha256 -mac HMAC -macopt hexkey:00…02 of "TN/0" and "TN/1" gives the words
    // 374bd971 a306b62a a520d596 a7d8327a b154a053 ebb79f62 e00a66c2 031bd6c6 | df7cdaee 39bab918 c9f5e911 4809bf92
    // 3cddbe4a 9d618a1d. Sizes [2,4]: odd word → 4. Shuffles by hand: mod 4, mod 3 (digit sum), mod 2.
    const list = makeAllocationList({
      seed: '02'.padStart(64, '0'),
      strata: [{ key: 'TN', slots: 11 }],
      sequences: ['AB', 'BA'],
      blockSizes: [2, 4],
    });
    expect(list.map(({ sequence }) => sequence).join(' ')).toBe('BA AB BA AB BA AB BA AB BA AB AB');
    expect(list.map(({ position }) => position)).toEqual([1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 11]);
  });

  it('has the digest that sha256sum gives for salt and list', () => {
    // ( printf abab…(32 bytes) | xxd -r -p; printf '[{"position":1,"sequence":"AB","stratum":"UP"},…]' ) | sha256sum
    const list = [
      { stratum: 'UP', position: 1, sequence: 'AB' },
      { stratum: 'UP', position: 2, sequence: 'BA' },
    ];
    expect(listCommitment('ab'.repeat(32), list)).toBe(
      'c40455ad89aedc015d4ed127aa0ead56eca6772ae99f25f27c6bbd7685b855b4',
    );
  });

  // proves RB-10
  it('is balanced to half a block in each stratum, wherever it is stopped, in 1 000 lists', () => {
    for (let number = 0; number < 1000; number += 1) {
      for (const { key } of crossover.strata) {
        let difference = 0;
        for (const { sequence } of madeWith(number).filter(({ stratum }) => stratum === key)) {
          difference += sequence === 'AB' ? 1 : -1;
          expect(Math.abs(difference)).toBeLessThanOrEqual(3);
        }
      }
    }
  });

  // proves RB-10
  it('favours no sequence at any place, and one place does not tell the next stratum', () => {
    // 4 000 lists; each share has SD 0.0079 around one half, so 0.04 is five of them. Seeds are fixed: no flicker.
    const lists = Array.from({ length: 4000 }, (_, number) =>
      madeWith(number).map(({ sequence }) => sequence),
    );
    const share = (of: (list: string[]) => boolean) => lists.filter(of).length / lists.length;
    for (let at = 0; at < 25; at += 1) {
      expect(Math.abs(share((list) => list[at] === 'AB') - 0.5)).toBeLessThan(0.04);
    }
    for (let at = 0; at < 12; at += 1) {
      expect(Math.abs(share((list) => list[at] === list[at + 12]) - 0.5)).toBeLessThan(0.04);
    }
  });

  it('draws three sequences equally often', () => {
    const first = Array.from({ length: 6000 }, (_, number) =>
      madeWith(number, { sequences: ['A', 'B', 'C'], blockSizes: [3, 6], strata: [{ key: 'UP', slots: 1 }] }),
    ).map(([slot]) => slot!.sequence);
    // Expected 2 000 each; chi-square with 2 degrees of freedom, 0.1 % point 13.82 (standard table).
    const counts = ['A', 'B', 'C'].map((sequence) => first.filter((drawn) => drawn === sequence).length);
    expect(counts.reduce((sum, count) => sum + (count - 2000) ** 2 / 2000, 0)).toBeLessThan(13.82);
  });

  // proves RB-01 and RB-12: the verifier is another implementation, by WebCrypto
  it('is made again from its seed, and its digest opened with its salt', async () => {
    await fc.assert(
      fc.asyncProperty(making, fc.stringMatching(/^[0-9a-f]{64}$/), async (from, salt) => {
        const list = makeAllocationList(from);
        const opened = {
          ...from,
          strata: [...from.strata],
          salt,
          list,
          commitment: listCommitment(salt, list),
        };
        expect(await verifyAllocation(opened)).toEqual({ sealHolds: true, madeFromSeed: true });
      }),
      { numRuns: 50 },
    );
  });

  // proves RB-12
  it('does not pass when one slot, the salt or the seed is another', async () => {
    const from = { ...crossover, seed: seedOf(7) };
    const list = makeAllocationList(from);
    const salt = seedOf(8);
    const opened = { ...from, salt, list, commitment: listCommitment(salt, list) };
    for (const at of list.keys()) {
      const changed = list.map((slot, i) =>
        i === at ? { ...slot, sequence: slot.sequence === 'AB' ? 'BA' : 'AB' } : slot,
      );
      expect(await verifyAllocation({ ...opened, list: changed })).toEqual({
        sealHolds: false,
        madeFromSeed: false,
      });
    }
    expect((await verifyAllocation({ ...opened, salt: seedOf(9) })).sealHolds).toBe(false);
    expect((await verifyAllocation({ ...opened, seed: seedOf(9) })).madeFromSeed).toBe(false);
    expect((await verifyAllocation({ ...opened, list: list.slice(1) })).sealHolds).toBe(false);
    expect((await verifyAllocation({ ...opened, blockSizes: [0] })).madeFromSeed).toBe(false);
  });

  it.each([
    ['a seed of other length', { seed: 'ab' }],
    ['one sequence', { sequences: ['AB'] }],
    ['an odd block for two sequences', { blockSizes: [4, 5] }],
    ['no block size', { blockSizes: [] }],
    ['an empty stratum', { strata: [{ key: 'UP', slots: 0 }] }],
  ])('is refused for %s', (_, wrong) => {
    expect(() => madeWith(1, wrong)).toThrow(RangeError);
  });
});
