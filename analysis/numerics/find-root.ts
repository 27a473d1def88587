import { DomainError } from '../units/errors.ts';

/**
 * Root of a continuous function between two points of opposite sign.
 *
 * Method   Brent's: inverse quadratic interpolation and secant steps, bisection as the safeguard
 * Domain   f(low) and f(high) of opposite sign, or one of them zero
 * Errors   DomainError naming `bracket`
 * Accuracy |error| at most `tolerance`·|root| + 1e-300
 * Source   Brent 1973, Algorithms for Minimization without Derivatives, chapter 4
 */
export function findRoot(f: (x: number) => number, low: number, high: number, tolerance = 1e-14): number {
  let a = low;
  let b = high;
  let fa = f(a);
  let fb = f(b);
  if (fa === 0) return a;
  if (fb === 0) return b;
  if (!(fa * fb < 0) && Math.sign(fa) === Math.sign(fb)) {
    throw new DomainError('bracket', 'two points with values of opposite sign', [fa, fb]);
  }
  let c = a;
  let fc = fa;
  let step = b - a;
  let previous = step;
  for (let i = 0; i < 200; i += 1) {
    if (Math.sign(fb) === Math.sign(fc)) {
      c = a;
      fc = fa;
      step = b - a;
      previous = step;
    }
    if (Math.abs(fc) < Math.abs(fb)) {
      [a, b, c] = [b, c, b];
      [fa, fb, fc] = [fb, fc, fb];
    }
    const limit = 0.5 * tolerance * Math.abs(b) + 2.3e-16 * Math.abs(b) + 1e-300;
    const half = 0.5 * (c - b);
    if (Math.abs(half) <= limit || fb === 0) return b;
    const interpolated = Math.abs(previous) >= limit && Math.abs(fa) > Math.abs(fb);
    const trial = interpolated ? interpolate(a, b, c, fa, fb, fc) : Infinity;
    const accepted =
      Math.abs(trial) < Math.min(1.5 * Math.abs(half), 0.5 * Math.abs(previous)) && trial * half > 0;
    previous = accepted ? step : half;
    step = accepted ? trial : half;
    a = b;
    fa = fb;
    b += Math.abs(step) > limit ? step : Math.sign(half) * limit;
    fb = f(b);
  }
  return b;
}

function interpolate(a: number, b: number, c: number, fa: number, fb: number, fc: number): number {
  const s = fb / fa;
  if (a === c) return ((c - b) * s) / (1 - s);
  const q = fa / fc;
  const r = fb / fc;
  const numerator = s * ((c - b) * q * (q - r) - (b - a) * (r - 1));
  return -numerator / ((q - 1) * (r - 1) * (s - 1));
}
