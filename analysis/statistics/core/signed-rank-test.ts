import { normalCdf, normalUpperTail } from '../../numerics/normal.ts';
import { signedRankCdf, signedRankUpperTail } from '../../numerics/signed-rank.ts';
import { midRanks } from './ranks.ts';
import type { Direction } from './t-test.ts';

/** Wilcoxon's signed-rank test of the differences that are not zero. */
export interface SignedRankTest {
  /** Differences that are not zero. */
  n: number;
  zeros: number;
  sumOfPositiveRanks: number;
  exact: boolean;
  /** Null for an exact test. */
  z: number | null;
  pValue: number;
  /** Standard deviation of the sum of positive ranks, ties corrected. */
  sigma: number;
}

/**
 * Tests grid-rounded differences; null when none is different from zero.
 *
 * Exact for at most 50 differences without zeros and ties, else normal with continuity correction.
 * Source   Hollander & Wolfe 1973, section 3.1
 */
export function signedRankTest(rounded: ArrayLike<number>, direction: Direction): SignedRankTest | null {
  const nonZero = Float64Array.from(rounded).filter((d) => d !== 0);
  const n = nonZero.length;
  if (n === 0) return null;
  const zeros = rounded.length - n;
  const { ranks, tieSum } = midRanks(nonZero.map(Math.abs));
  const v = ranks.reduce((sum, rank, i) => (nonZero[i]! > 0 ? sum + rank : sum), 0);
  const exact = n <= 50 && zeros === 0 && tieSum === 0;
  const sigma = Math.sqrt((n * (n + 1) * (2 * n + 1)) / 24 - tieSum / 48);
  const centre = (n * (n + 1)) / 4;
  const correction = direction === 'both' ? 0.5 * Math.sign(v - centre) : direction === 'above' ? 0.5 : -0.5;
  const z = (v - centre - correction) / sigma;
  const below = () => (exact ? signedRankCdf(v, n) : normalCdf(z));
  const above = () => (exact ? signedRankUpperTail(v, n) : normalUpperTail(z));
  const pValue = { both: () => Math.min(1, 2 * (v > centre ? above() : below())), above, below }[direction]();
  return { n, zeros, sumOfPositiveRanks: v, exact, z: exact ? null : z, pValue, sigma };
}
