import { requireNotNegative } from '../units/require.ts';
import { DomainError } from '../units/errors.ts';
import { normalCdf, normalDensity, normalUpperTail } from './normal.ts';
import { integrate } from './quadrature.ts';

/**
 * P(Q > q) of the range of k independent standard normal variables (studentised range, infinite df).
 *
 * Formula  k ∫ φ(z)[Φ(z)^(k−1) − (Φ(z) − Φ(z − q))^(k−1)] dz: the complement of the usual integral taken inside,
 *          so that the upper tail keeps its digits
 * Domain   q at least 0, k an integer of at least 2
 * Errors   DomainError naming the argument
 * Accuracy relative 1e-12
 * Source   Tukey 1953; Miller 1981, Simultaneous Statistical Inference, section 2.1
 */
export function studentisedRangeUpperTail(q: number, k: number): number {
  requireNotNegative('q', q);
  if (!Number.isInteger(k) || k < 2) throw new DomainError('k', 'an integer of at least 2', k);
  if (q === 0) return 1;
  if (q > 80) return 0;
  const integrand = (z: number): number => {
    const below = normalCdf(z);
    const density = normalDensity(z);
    if (below === 0 || density === 0) return 0;
    const share = normalCdf(z - q) / below;
    const power = (k - 1) * Math.log(below);
    const kept = Math.expm1(
      (k - 1) * (share < 0.5 ? Math.log1p(-share) : Math.log(between(z - q, z) / below)),
    );
    return -density * Math.exp(power) * kept;
  };
  const middle = q / 2;
  return Math.min(1, k * (integrate(integrand, -38, middle) + integrate(integrand, middle, 38)));
}

/** P(low < Z ≤ high), from the side on which it does not cancel. */
function between(low: number, high: number): number {
  return low > 0 ? normalUpperTail(low) - normalUpperTail(high) : normalCdf(high) - normalCdf(low);
}
