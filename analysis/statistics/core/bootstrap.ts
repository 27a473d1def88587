import { normalCdf, normalQuantile } from '../../numerics/normal.ts';
import { valueAtRank } from './order-statistics.ts';

/** Percentile and BCa limits; null where the resampled values give none. */
export interface BootstrapLimits {
  percentile_ci_lower: number;
  percentile_ci_upper: number;
  bca_ci_lower: number | null;
  bca_ci_upper: number | null;
  bca_z0: number | null;
  bca_acceleration: number;
}

/**
 * Bootstrap intervals from the resampled values of a statistic.
 *
 * Shape    `resampled` is sorted in place; `below` the number of them below the estimate, ties of rounding not counted;
 *          `leaveOneOut` the statistic without each subject in turn
 * Formula  z₀ = Φ⁻¹(share below), a = Σl³/(6(Σl²)^1.5), levels Φ(z₀ + (z₀ + z)/(1 − a(z₀ + z))), quantiles at rank (R + 1)p
 * Source   Efron 1987, JASA 82:171-185; Efron & Tibshirani 1993, chapter 14
 */
export function bootstrapLimits(
  resampled: Float64Array,
  below: number,
  leaveOneOut: Float64Array,
  confidence: number,
): BootstrapLimits {
  resampled.sort();
  const tail = (1 - confidence) / 2;
  const z0 = normalQuantile(below / resampled.length);
  const acceleration = accelerationOf(leaveOneOut);
  const at = (p: number) => valueAtRank(resampled, (resampled.length + 1) * p);
  const corrected = (z: number) => {
    const sum = z0 + z;
    return Number.isFinite(z0) ? at(normalCdf(z0 + sum / (1 - acceleration * sum))) : null;
  };
  return {
    percentile_ci_lower: at(tail),
    percentile_ci_upper: at(1 - tail),
    bca_ci_lower: corrected(normalQuantile(tail)),
    bca_ci_upper: corrected(-normalQuantile(tail)),
    bca_z0: Number.isFinite(z0) ? z0 : null,
    bca_acceleration: acceleration,
  };
}

function accelerationOf(leaveOneOut: Float64Array): number {
  const n = leaveOneOut.length;
  const shift = leaveOneOut[0]!;
  const average = leaveOneOut.reduce((sum, value) => sum + (value - shift), 0) / n;
  let squares = 0;
  let cubes = 0;
  for (const value of leaveOneOut) {
    const influence = average - (value - shift);
    squares += influence ** 2;
    cubes += influence ** 3;
  }
  return squares > 0 ? cubes / (6 * squares ** 1.5) : 0;
}
