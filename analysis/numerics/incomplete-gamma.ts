import { requireNotNegative, requirePositive } from '../units/require.ts';
import { devianceTerm, stirlingError } from './log-gamma.ts';

const logTwoPi = 1.8378770664093456;

/**
 * Regularised incomplete gamma functions P(a, x) (lower) and Q(a, x) (upper), each computed as itself in its tail.
 *
 * Formula  series for x < a + 1, Legendre's continued fraction (modified Lentz) above
 * Domain   a finite and above 0, x at least 0
 * Errors   DomainError naming the argument
 * Accuracy relative 1e-13 in the smaller of the two, down to 1e-300
 * Source   Abramowitz & Stegun 1964, 6.5.29 and 6.5.31
 */
export function incompleteGammaLower(a: number, x: number): number {
  requireArguments(a, x);
  if (x === 0) return 0;
  return x < a + 1 ? lowerSeries(a, x) : 1 - upperFraction(a, x);
}

/** Upper regularised incomplete gamma function Q(a, x) = 1 − P(a, x); see `incompleteGammaLower`. */
export function incompleteGammaUpper(a: number, x: number): number {
  requireArguments(a, x);
  if (x === 0) return 1;
  return x < a + 1 ? 1 - lowerSeries(a, x) : upperFraction(a, x);
}

/** ln of x^a e^(−x) / Γ(a), by the saddle-point form of Loader 2000. */
export function logGammaKernel(a: number, x: number): number {
  return 0.5 * (Math.log(a) - logTwoPi) - stirlingError(a) - devianceTerm(a, x);
}

function requireArguments(a: number, x: number): void {
  requirePositive('a', a);
  requireNotNegative('x', x);
}

function lowerSeries(a: number, x: number): number {
  let term = 1 / a;
  let sum = term;
  for (let n = 1; ; n += 1) {
    term *= x / (a + n);
    sum += term;
    if (term < sum * 1e-17) break;
  }
  return Math.exp(logGammaKernel(a, x)) * sum;
}

function upperFraction(a: number, x: number): number {
  if (x === Infinity) return 0;
  let b = x + 1 - a;
  let c = 1e300;
  let d = 1 / b;
  let fraction = d;
  for (let i = 1; i < 1_000_000; i += 1) {
    const coefficient = -i * (i - a);
    b += 2;
    d = 1 / (coefficient * d + b);
    c = b + coefficient / c;
    const factor = d * c;
    fraction *= factor;
    if (Math.abs(factor - 1) < 2.3e-16) break;
  }
  return Math.exp(logGammaKernel(a, x)) * fraction;
}
