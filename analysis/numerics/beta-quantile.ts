import { requirePositive, requireWithin } from '../units/require.ts';
import { incompleteBeta, logBetaKernel } from './incomplete-beta.ts';
import { quantileOfTail } from './tail-quantile.ts';

/**
 * Quantile of the beta distribution, as x and 1 − x, each with its own relative accuracy.
 *
 * Formula  solves I_x(a, b) = p in the odds x/(1 − x), on the smaller tail
 * Domain   p from 0 to 1; a, b finite and above 0
 * Errors   DomainError naming the argument
 */
export function betaQuantile(p: number, a: number, b: number): { x: number; y: number } {
  requireWithin('p', p, 0, 1);
  requirePositive('a', a);
  requirePositive('b', b);
  if (p === 0) return { x: 0, y: 1 };
  if (p === 1) return { x: 1, y: 0 };
  const lower = p <= 0.5;
  const odds = quantileOfTail({
    tail: (w) =>
      lower ? incompleteBeta(w / (1 + w), 1 / (1 + w), a, b) : incompleteBeta(1 / (1 + w), w / (1 + w), b, a),
    slope: (w) => Math.exp(logBetaKernel(w / (1 + w), 1 / (1 + w), a, b)),
    probability: lower ? p : 1 - p,
    rising: lower,
    start: a / b,
  });
  return { x: odds / (1 + odds), y: 1 / (1 + odds) };
}
