import { requirePositive } from '../units/require.ts';

const halfLogTwoPi = 0.9189385332046728;

/** Coefficients B₂ₖ/(2k(2k−1)) of Stirling's series, k = 1 … 8. */
const stirlingCoefficients = [
  1 / 12,
  -1 / 360,
  1 / 1260,
  -1 / 1680,
  1 / 1188,
  -691 / 360360,
  1 / 156,
  -3617 / 122400,
] as const;

/**
 * Natural logarithm of the gamma function.
 *
 * Formula  (x − ½)ln x − x + ½ln 2π + Stirling's series, after lnΓ(x) = lnΓ(x + m) − ln(x(x+1)…(x+m−1))
 *          has carried x to 12 or more
 * Domain   x finite and above 0
 * Errors   DomainError naming x
 * Accuracy absolute 4e-15 × max(1, |lnΓ|)
 * Source   Abramowitz & Stegun 1964, 6.1.41 (series), 6.1.15 (recurrence)
 */
export function logGamma(x: number): number {
  requirePositive('x', x);
  if (x === 1 || x === 2) return 0;
  let shifted = x;
  let product = 1;
  while (shifted < 12) {
    product *= shifted;
    shifted += 1;
  }
  return (
    (shifted - 0.5) * Math.log(shifted) - shifted + halfLogTwoPi + stirlingSeries(shifted) - Math.log(product)
  );
}

/**
 * What Stirling's formula leaves out: lnΓ(x + 1) − (x + ½)ln x + x − ½ln 2π.
 *
 * Kept apart because densities of large arguments need it without the large terms around it.
 * Domain   x finite and above 0
 * Source   Loader 2000, Fast and accurate computation of binomial probabilities (the use); A & S 6.1.41 (the series)
 */
export function stirlingError(x: number): number {
  return x >= 12 ? stirlingSeries(x) : logGamma(x + 1) - (x + 0.5) * Math.log(x) + x - halfLogTwoPi;
}

function stirlingSeries(x: number): number {
  const inverseSquare = 1 / (x * x);
  let sum = 0;
  for (let k = stirlingCoefficients.length - 1; k >= 0; k -= 1)
    sum = sum * inverseSquare + stirlingCoefficients[k]!;
  return sum / x;
}

/**
 * Deviance part of a Poisson or binomial probability: x·ln(x/mean) + mean − x, without cancellation near x = mean.
 *
 * Domain   x and mean above 0
 * Source   Loader 2000 (as above)
 */
export function devianceTerm(x: number, mean: number): number {
  if (Math.abs(x - mean) >= 0.1 * (x + mean)) return x * Math.log(x / mean) + mean - x;
  const v = (x - mean) / (x + mean);
  let sum = (x - mean) * v;
  let term = 2 * x * v;
  for (let j = 3; ; j += 2) {
    term *= v * v;
    const next = sum + term / j;
    if (next === sum) return next;
    sum = next;
  }
}
