import { requireNotNegative, requirePositive } from '../units/require.ts';
import { betaQuantile } from './beta-quantile.ts';
import { incompleteBeta } from './incomplete-beta.ts';

/**
 * P(F > f) of the F distribution with d1 and d2 degrees of freedom (real numbers allowed).
 *
 * Formula  I_x(d2/2, d1/2), x = d2/(d2 + d1 f)
 * Domain   f at least 0 (Infinity answers 0); d1, d2 finite and above 0
 * Errors   DomainError naming the argument
 * Source   Abramowitz & Stegun 1964, 26.6.2
 */
export function fUpperTail(f: number, d1: number, d2: number): number {
  requirePositive('d1', d1);
  requirePositive('d2', d2);
  if (f === Infinity) return 0;
  requireNotNegative('f', f);
  const ratio = (d1 * f) / d2;
  return incompleteBeta(1 / (1 + ratio), ratio / (1 + ratio), d2 / 2, d1 / 2);
}

/** P(F ≤ f), with full relative accuracy for small f; see `fUpperTail`. */
export function fCdf(f: number, d1: number, d2: number): number {
  requirePositive('d1', d1);
  requirePositive('d2', d2);
  if (f === Infinity) return 1;
  requireNotNegative('f', f);
  const ratio = (d1 * f) / d2;
  return incompleteBeta(ratio / (1 + ratio), 1 / (1 + ratio), d1 / 2, d2 / 2);
}

/** Quantile of the F distribution: f with P(F ≤ f) = p. The upper quantile is 1 / fQuantile(q, d2, d1). */
export function fQuantile(p: number, d1: number, d2: number): number {
  requirePositive('d1', d1);
  requirePositive('d2', d2);
  const { x, y } = betaQuantile(p, d1 / 2, d2 / 2);
  return (d2 * x) / (d1 * y);
}
