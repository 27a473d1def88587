import { describe, expect, it } from 'vitest';
import { seededRandom, xoshiro } from './random.ts';

describe('seededRandom', () => {
  it('follows the published generator from the state 1, 2, 3, 4', () => {
    // By hand from Blackman & Vigna's definition: rotl(5·s1, 7)·9, e.g. rotl(10, 7)·9 = 1280·9 = 11520, then s1 = 0.
    const random = xoshiro([1, 2, 3, 4]);
    expect([random.bits(), random.bits(), random.bits(), random.bits()]).toEqual([
      11520, 0, 5927040, 70819200,
    ]);
  });

  it('gives the same numbers for the same seed and others for another', () => {
    const draw = (seed: number) => {
      const random = seededRandom(seed);
      return Array.from({ length: 20 }, () => random.bits());
    };
    expect(draw(7)).toEqual(draw(7));
    expect(draw(7)).not.toEqual(draw(8));
    expect(draw(2 ** 40)).not.toEqual(draw(0));
  });

  it('draws each of a few integers equally often', () => {
    const random = seededRandom(1);
    const counts = new Array<number>(7).fill(0);
    for (let i = 0; i < 70_000; i += 1) counts[random.below(7)]! += 1;
    const chiSquare = counts.reduce((sum, count) => sum + (count - 10_000) ** 2 / 10_000, 0);
    expect(chiSquare).toBeLessThan(22.46); // χ²(6) at 0.001
    expect(counts.length).toBe(7);
  });
});
