import { requireFinite, requirePositive } from '../units/require.ts';
import { logGamma } from './log-gamma.ts';
import { normalCdf } from './normal.ts';
import { integrate } from './quadrature.ts';

/**
 * P(T ≤ t) of the noncentral t distribution, T = (Z + δ)/S with S² ~ χ²/df.
 *
 * Formula  ∫ Φ(t·s − δ) f(s) ds over the density f of S, taken in u = ln s; the upper tail is P(T ≤ −t | −δ),
 *          an integral of its own, so neither tail is got by subtraction
 * Domain   t and δ finite, df finite and above 0
 * Errors   DomainError naming the argument
 * Accuracy relative 1e-11 down to 1e-280
 * Source   Johnson, Kotz & Balakrishnan 1995, Continuous Univariate Distributions 2, section 31.4
 */
export function noncentralTCdf(t: number, df: number, noncentrality: number): number {
  requireFinite('t', t);
  requirePositive('df', df);
  requireFinite('noncentrality', noncentrality);
  const constant = Math.log(2) + (df / 2) * Math.log(df / 2) - logGamma(df / 2);
  const logDensity = (u: number): number => constant + df * (u - 0.5 * Math.exp(2 * u));
  const logIntegrand = (u: number): number => logDensity(u) + logNormalCdf(t * Math.exp(u) - noncentrality);
  const width = 1 / Math.sqrt(2 * df);
  const peak = highestPoint(logIntegrand, df, width / 4);
  const floor = logIntegrand(peak) - 46;
  const low = edge(logIntegrand, peak, -width, floor);
  const high = edge(logIntegrand, peak, width, floor);
  const integrand = (u: number): number =>
    Math.exp(logDensity(u)) * normalCdf(t * Math.exp(u) - noncentrality);
  return Math.min(1, integrate(integrand, low, peak, 1e-12) + integrate(integrand, peak, high, 1e-12));
}

/** P(T > t); see `noncentralTCdf`. */
export function noncentralTUpperTail(t: number, df: number, noncentrality: number): number {
  return noncentralTCdf(-t, df, -noncentrality);
}

/** Maximum of a concave function of u = ln s, to `precision`, by golden-section search. */
function highestPoint(f: (u: number) => number, df: number, precision: number): number {
  const ratio = 0.6180339887498949;
  let low = -Math.max(40, 40 / df);
  let high = 20;
  let left = high - ratio * (high - low);
  let right = low + ratio * (high - low);
  let [atLeft, atRight] = [f(left), f(right)];
  while (high - low > precision) {
    if (atLeft > atRight) {
      high = right;
      [right, atRight] = [left, atLeft];
      left = high - ratio * (high - low);
      atLeft = f(left);
    } else {
      low = left;
      [left, atLeft] = [right, atRight];
      right = low + ratio * (high - low);
      atRight = f(right);
    }
  }
  return 0.5 * (low + high);
}

/** Walks outwards in growing steps until f is below the floor. */
function edge(f: (u: number) => number, from: number, step: number, floor: number): number {
  let u = from;
  let size = step;
  for (let i = 0; i < 200 && f(u) > floor; i += 1) {
    u += size;
    size *= 1.3;
  }
  return u;
}

/** ln Φ(x), by its leading term where Φ underflows: enough to find the way back to the peak. */
function logNormalCdf(x: number): number {
  return x > -37 ? Math.log(normalCdf(x)) : -0.5 * x * x - Math.log(-x) - 0.92;
}
