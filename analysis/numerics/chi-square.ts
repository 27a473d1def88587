import { requirePositive, requireWithin } from '../units/require.ts';
import { incompleteGammaLower, incompleteGammaUpper, logGammaKernel } from './incomplete-gamma.ts';
import { normalQuantile } from './normal.ts';
import { quantileOfTail } from './tail-quantile.ts';

/**
 * P(χ² > x) with df degrees of freedom (real numbers allowed).
 *
 * Domain   x at least 0, df finite and above 0
 * Errors   DomainError naming the argument
 * Source   Abramowitz & Stegun 1964, 26.4.19
 */
export function chiSquareUpperTail(x: number, df: number): number {
  return x === Infinity ? 0 : incompleteGammaUpper(df / 2, x / 2);
}

/** P(χ² ≤ x), with full relative accuracy for small x; see `chiSquareUpperTail`. */
export function chiSquareCdf(x: number, df: number): number {
  return x === Infinity ? 1 : incompleteGammaLower(df / 2, x / 2);
}

/**
 * Quantile of χ²: x with P(χ² ≤ x) = p.
 *
 * Domain   p from 0 to 1 (1 answers Infinity), df finite and above 0
 * Errors   DomainError naming the argument
 * Source   start from Wilson & Hilferty 1931, then Newton on the logarithm of the smaller tail
 */
export function chiSquareQuantile(p: number, df: number): number {
  requireWithin('p', p, 0, 1);
  requirePositive('df', df);
  if (p === 0) return 0;
  if (p === 1) return Infinity;
  const lower = p <= 0.5;
  const cube = 1 - 2 / (9 * df) + normalQuantile(p) * Math.sqrt(2 / (9 * df));
  return quantileOfTail({
    tail: (x) => (lower ? chiSquareCdf(x, df) : chiSquareUpperTail(x, df)),
    slope: (x) => Math.exp(logGammaKernel(df / 2, x / 2)),
    probability: lower ? p : 1 - p,
    rising: lower,
    start: cube > 0.1 ? df * cube ** 3 : df * 0.001,
  });
}
