import { DomainError } from '../units/errors.ts';
import { betaQuantile } from './beta-quantile.ts';
import { incompleteBeta } from './incomplete-beta.ts';

/**
 * P(B ≤ k) for n fair trials.
 *
 * Formula  sum of exact binomial coefficients over 2ⁿ for n ≤ 50, I_½(n − k, k + 1) above
 * Domain   n an integer of at least 0, k an integer
 * Errors   DomainError naming n
 * Source   Abramowitz & Stegun 1964, 26.5.24
 */
export function fairBinomialCdf(k: number, n: number): number {
  if (!Number.isInteger(n) || n < 0) throw new DomainError('n', 'an integer of at least 0', n);
  if (k < 0) return 0;
  if (k >= n) return 1;
  if (n > 50) return incompleteBeta(0.5, 0.5, n - k, k + 1);
  let coefficient = 1;
  let sum = 1;
  for (let i = 1; i <= k; i += 1) {
    coefficient = Math.round((coefficient * (n - i + 1)) / i);
    sum += coefficient;
  }
  return sum / 2 ** n;
}

/**
 * Exact confidence bounds of a proportion; each excludes `tail` of probability.
 *
 * Domain   successes from 0 to trials, tail above 0 and below 1; no success answers 0, only successes answer 1
 * Source   Clopper & Pearson 1934, Biometrika 26:404-413
 */
export function proportionLowerBound(successes: number, trials: number, tail: number): number {
  return successes === 0 ? 0 : betaQuantile(tail, successes, trials - successes + 1).x;
}

/** Upper bound of the same interval; see `proportionLowerBound`. */
export function proportionUpperBound(successes: number, trials: number, tail: number): number {
  return successes === trials ? 1 : betaQuantile(tail, trials - successes, successes + 1).y;
}
