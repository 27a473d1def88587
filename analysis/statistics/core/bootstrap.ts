import { normalCdf, normalQuantile } from '../../numerics/normal.ts';
import { valueAtRank } from './order-statistics.ts';

/** Distribution of a statistic over resamples of the subjects. */
export interface ResampledStatistic {
  /** Share of resamples below the estimate; ties of rounding do not count. */
  shareBelow: number;
  quantile(p: number): number;
  /** The statistic without each subject in turn. */
  leaveOneOut: Float64Array;
}

/** Percentile and BCa limits; null where the estimate lies outside all resampled values. */
export interface BootstrapLimits {
  percentile_ci_lower: number;
  percentile_ci_upper: number;
  bca_ci_lower: number | null;
  bca_ci_upper: number | null;
  bca_z0: number | null;
  bca_acceleration: number;
}

/**
 * Bootstrap intervals of a statistic.
 *
 * Formula  z₀ = Φ⁻¹(share below), a = Σl³/(6(Σl²)^1.5), levels Φ(z₀ + (z₀ + z)/(1 − a(z₀ + z)))
 * Source   Efron 1987, JASA 82:171-185; Efron & Tibshirani 1993, An Introduction to the Bootstrap, chapter 14
 */
export function bootstrapLimits(statistic: ResampledStatistic, confidence: number): BootstrapLimits {
  const tail = (1 - confidence) / 2;
  const z0 = normalQuantile(statistic.shareBelow);
  const acceleration = accelerationOf(statistic.leaveOneOut);
  const corrected = (z: number) => {
    if (!Number.isFinite(z0)) return null;
    const sum = z0 + z;
    return statistic.quantile(normalCdf(z0 + sum / (1 - acceleration * sum)));
  };
  return {
    percentile_ci_lower: statistic.quantile(tail),
    percentile_ci_upper: statistic.quantile(1 - tail),
    bca_ci_lower: corrected(normalQuantile(tail)),
    bca_ci_upper: corrected(-normalQuantile(tail)),
    bca_z0: Number.isFinite(z0) ? z0 : null,
    bca_acceleration: acceleration,
  };
}

/** Quantiles of sorted resampled values at rank (R + 1)p. */
export function quantileOfResamples(sorted: Float64Array): (p: number) => number {
  return (p) => valueAtRank(sorted, (sorted.length + 1) * p);
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
