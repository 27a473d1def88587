import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { orderStatistic, valueAtRank } from './order-statistics.ts';
import { midRanks } from './ranks.ts';

describe('order statistics', () => {
  it('are what sorting gives, ties included', () => {
    const values = fc.array(fc.integer({ min: -5, max: 5 }), { minLength: 1, maxLength: 60 });
    fc.assert(
      fc.property(values, (list) => {
        const sorted = Float64Array.from(list).sort();
        sorted.forEach((value, i) => expect(orderStatistic(Float64Array.from(list), i + 1)).toBe(value));
      }),
    );
  });

  it('interpolate between ranks and stop at the ends', () => {
    const sorted = Float64Array.of(1, 2, 4);
    expect([0.2, 1, 1.5, 2.25, 3, 9].map((rank) => valueAtRank(sorted, rank))).toEqual([
      1, 1, 1.5, 2.5, 4, 4,
    ]);
  });
});

describe('midRanks', () => {
  it('shares the ranks of ties and sums t³ − t', () => {
    const { ranks, tieSum } = midRanks([3, 1, 3, 2, 3]);
    expect([...ranks]).toEqual([4, 1, 4, 2, 4]);
    expect(tieSum).toBe(24);
  });
});
