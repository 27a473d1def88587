import { describe, expect, it } from 'vitest';
import { betaQuantile } from './beta-quantile.ts';
import { fairBinomialCdf, proportionLowerBound, proportionUpperBound } from './binomial.ts';
import { chiSquareQuantile, chiSquareUpperTail } from './chi-square.ts';
import { fCdf, fQuantile, fUpperTail } from './f-distribution.ts';
import { normalCdf, normalDensity, normalQuantile, normalUpperTail } from './normal.ts';
import { signedRankCdf, signedRankQuantile, signedRankUpperTail } from './signed-rank.ts';
import { studentTCdf, studentTQuantile, studentTTwoSided, studentTUpperTail } from './student-t.ts';
import { studentisedRangeUpperTail } from './studentised-range.ts';

describe('published tables, to the digits they print', () => {
  it('agrees with the normal distribution of Abramowitz & Stegun 1964, tables 26.1 and 26.2', () => {
    expect(normalCdf(1)).toBeCloseTo(0.841344746068543, 14);
    expect(normalDensity(1)).toBeCloseTo(0.24197072451914337, 15);
    expect(-Math.log10(normalUpperTail(10))).toBeCloseTo(23.11805, 5);
  });

  it("agrees with percentage points of Student's t, table 26.10", () => {
    const rows = [
      [1, 12.706, 63.657],
      [5, 2.571, 4.032],
      [10, 2.228, 3.169],
      [30, 2.042, 2.75],
      [120, 1.98, 2.617],
    ] as const;
    for (const [df, p05, p01] of rows) {
      expect(studentTQuantile(0.975, df)).toBeCloseTo(p05, 3);
      expect(-studentTQuantile(0.005, df)).toBeCloseTo(p01, 3);
    }
  });

  it('agrees with percentage points of χ², table 26.8', () => {
    expect(chiSquareQuantile(0.95, 1)).toBeCloseTo(3.84146, 5);
    expect(chiSquareQuantile(0.95, 10)).toBeCloseTo(18.307, 4);
    expect(chiSquareQuantile(0.005, 30)).toBeCloseTo(13.7867, 4);
    expect(chiSquareQuantile(0.999, 5)).toBeCloseTo(20.515, 3);
  });

  it('agrees with percentage points of F, table 26.9', () => {
    expect(fQuantile(0.95, 3, 10)).toBeCloseTo(3.71, 2);
    expect(fQuantile(0.99, 5, 20)).toBeCloseTo(4.1, 2);
    expect(fQuantile(0.975, 1, 1)).toBeCloseTo(647.8, 1);
  });

  it('agrees with percentage points of the studentised range, infinite df (Harter 1960)', () => {
    const rows = [
      [2, 2.772, 3.643],
      [3, 3.314, 4.12],
      [4, 3.633, 4.403],
      [10, 4.474, 5.157],
    ] as const;
    for (const [k, p05, p01] of rows) {
      expect(studentisedRangeUpperTail(p05, k)).toBeCloseTo(0.05, 3);
      expect(studentisedRangeUpperTail(p01, k)).toBeCloseTo(0.01, 4);
    }
  });

  it('agrees with the signed-rank tail probabilities of Hollander & Wolfe 1973, table A.4', () => {
    expect(signedRankUpperTail(15, 5)).toBeCloseTo(0.031, 3);
    expect(signedRankUpperTail(47, 10)).toBeCloseTo(0.024, 3);
    expect(signedRankUpperTail(90, 15)).toBeCloseTo(0.047, 3);
  });

  it('agrees with the exact limits of 4 successes in 10 of Clopper & Pearson 1934', () => {
    expect(proportionLowerBound(4, 10, 0.025)).toBeCloseTo(0.1216, 4);
    expect(proportionUpperBound(4, 10, 0.025)).toBeCloseTo(0.7376, 4);
  });
});

describe('closed forms', () => {
  it('is the Cauchy distribution for t with 1 df: P(T > t) = ½ − atan(t)/π', () => {
    expect(studentTUpperTail(1, 1)).toBeCloseTo(0.25, 14);
    expect(studentTUpperTail(1e12, 1)).toBeCloseTo(1 / (Math.PI * 1e12), 26);
    expect(studentTQuantile(1e-300, 1) / (-1e300 / Math.PI)).toBeCloseTo(1, 13);
    expect(studentTCdf(-1, 1)).toBeCloseTo(0.25, 14);
  });

  it('is ½ − t/(2√(2 + t²)) for t with 2 df, far into the tail', () => {
    const t = 1e8;
    expect(studentTUpperTail(t, 2) / (1 / (2 * t * t))).toBeCloseTo(1, 13);
  });

  it('is exp(−x/2) for χ² with 2 df, and (1 + f/n)^(−n) for F with 2 and 2n df', () => {
    expect(chiSquareUpperTail(1380, 2) / Math.exp(-690)).toBeCloseTo(1, 12);
    expect(fUpperTail(30, 2, 80) / (1 + 30 / 40) ** -40).toBeCloseTo(1, 13);
    expect(fCdf(30, 2, 80)).toBeCloseTo(1 - (1 + 30 / 40) ** -40, 15);
  });

  it('approaches the normal distribution for t with very many df, and t² for F with 1 df', () => {
    expect(studentTUpperTail(2, 1e12) / normalUpperTail(2)).toBeCloseTo(1, 10);
    expect(fUpperTail(2.262 ** 2, 1, 9) / studentTTwoSided(2.262, 9)).toBeCloseTo(1, 13);
  });

  it('counts sign assignments and subsets exactly', () => {
    expect(fairBinomialCdf(0, 50)).toBe(2 ** -50);
    expect(fairBinomialCdf(3, 10)).toBe((1 + 10 + 45 + 120) / 1024);
    expect(fairBinomialCdf(0, 51) / 2 ** -51).toBeCloseTo(1, 13);
    expect(signedRankCdf(2, 3)).toBe(3 / 8); // sums 0, 1, 2
    expect(signedRankQuantile(3 / 8, 3)).toBe(2);
    expect(signedRankQuantile(3 / 8 + 1e-9, 3)).toBe(3); // 1 + 2 and 3
  });

  it('answers the ends of a distribution', () => {
    expect(normalQuantile(0)).toBe(-Infinity);
    expect(normalQuantile(1)).toBe(Infinity);
    expect(studentTTwoSided(Infinity, 4)).toBe(0);
    expect(fUpperTail(0, 2, 3)).toBe(1);
    expect(fUpperTail(Infinity, 2, 3)).toBe(0);
    expect(chiSquareQuantile(0, 3)).toBe(0);
    expect(betaQuantile(0, 2, 3)).toEqual({ x: 0, y: 1 });
    expect(studentisedRangeUpperTail(0, 3)).toBe(1);
    expect(signedRankCdf(-1, 4)).toBe(0);
    expect(fairBinomialCdf(4, 4)).toBe(1);
  });

  it.each([
    ['df', () => studentTTwoSided(1, 0)],
    ['p', () => normalQuantile(1.1)],
    ['d2', () => fUpperTail(1, 2, -1)],
    ['x', () => chiSquareUpperTail(-1, 2)],
    ['k', () => studentisedRangeUpperTail(1, 1)],
    ['n', () => signedRankCdf(3, 51)],
    ['n', () => fairBinomialCdf(1, 2.5)],
  ])('refuses a value outside the domain, naming %s', (argument, work) => {
    expect(work).toThrowError(expect.objectContaining({ name: 'DomainError', argument }) as Error);
  });
});
