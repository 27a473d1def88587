import { describe, expect, it } from 'vitest';
import { centred, correlation, mean, median, standardDeviation, sumOfProducts, variance } from './moments.ts';

describe('moments', () => {
  // NIST Statistical Reference Datasets, univariate summary statistics, certified values.
  it.each([
    ['NumAcc1', Float64Array.of(10000001, 10000003, 10000002), 10000002, 1],
    ['NumAcc2', alternating(1.2, 1.1, 1.3), 1.2, 0.1],
    ['NumAcc3', alternating(1000000.2, 1000000.1, 1000000.3), 1000000.2, 0.1],
    ['NumAcc4', alternating(10000000.2, 10000000.1, 10000000.3), 10000000.2, 0.1],
  ])(
    'agree with the certified mean and standard deviation of %s',
    (_, values, certifiedMean, certifiedSd) => {
      expect(mean(values)).toBeCloseTo(certifiedMean, 8);
      // The last two sets are not representable exactly: 1e-9 is what the doubles allow.
      expect(Math.abs(standardDeviation(values) - certifiedSd)).toBeLessThan(1.2e-8);
    },
  );

  it('do not depend on an offset of 1e8 or a scale of 1e-9', () => {
    const x = [1.25, 2.5, 4.125, 3, 7.75];
    const y = [2, 1.5, 5.25, 6, 3];
    const far = x.map((value) => value + 1e8);
    expect(variance(far)).toBe(variance(x));
    expect(correlation(far, y)).toBeCloseTo(correlation(x, y)!, 15);
    expect(
      sumOfProducts(
        x.map((value) => value * 1e-9),
        y,
      ) / sumOfProducts(x, y),
    ).toBeCloseTo(1e-9, 23);
  });

  it('leave exactly nothing of values that are equal', () => {
    expect([...centred([0.1, 0.1, 0.1])]).toEqual([0, 0, 0]);
    expect(variance([0.3, 0.3, 0.3, 0.3])).toBe(0);
    expect(correlation([1, 2, 3], [0.7, 0.7, 0.7])).toBeNull();
  });

  it('find the middle value', () => {
    expect(median([5, 1, 3])).toBe(3);
    expect(median([5, 1, 3, 2])).toBe(2.5);
  });
});

/** 1001 values: the first, then 500 pairs of the second and third. */
function alternating(first: number, second: number, third: number): Float64Array {
  return Float64Array.from({ length: 1001 }, (_, i) => (i === 0 ? first : i % 2 === 1 ? second : third));
}
