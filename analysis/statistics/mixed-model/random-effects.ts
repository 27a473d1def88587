import type { FreeElements } from './profiled-deviance.ts';
import type { RelativeFactor } from './relative-covariance.ts';
import type { SlopeCovariate } from './subject-statistics.ts';

/** Variances and covariance of the random effects, of intercept and slope as written in the plan. */
export interface RandomEffects {
  readonly interceptVariance: number;
  /** Null without a random slope. */
  readonly slopeVariance: number | null;
  /** Null without a correlated random slope. */
  readonly covariance: number | null;
  /** Null also when one of the variances is zero. */
  readonly correlation: number | null;
}

/** A diagonal element of Λ below this counts as zero. */
const BOUNDARY = 1e-5;

/** Λ of intercept and slope of the covariate as it is, from Λ of the scaled covariate. */
function factorOnDataScale([l11, l21, l22]: RelativeFactor, slope: SlopeCovariate | null): RelativeFactor {
  if (slope === null) return [l11, 0, 0];
  const { origin, unit } = slope;
  // Effects (b₀ − b₁·origin/unit, b₁/unit): two rows, made lower triangular by a rotation.
  const row = [l11 - (origin / unit) * l21, -(origin / unit) * l22] as const;
  const length = Math.hypot(row[0], row[1]);
  if (length === 0) return [0, l21 / unit, Math.abs(l22) / unit];
  return [length, (row[0] * l21 + row[1] * l22) / length / unit, Math.abs(l11 * l22) / length / unit];
}

/** Elements of Λ that are estimated and the value of the covariate at which Λ describes the intercept. */
export interface FreeFactor {
  readonly free: FreeElements;
  readonly origin: number;
}

/**
 * What is left to estimate when diagonal elements of Λ on the data's scale below 1e-5 are set to zero; null when
 * there are none. Without an intercept variance nothing can be correlated with it, and the slope alone is left.
 */
export function leftAtBoundary(
  factor: RelativeFactor,
  slope: SlopeCovariate | null,
  { free, origin }: FreeFactor,
): FreeFactor | null {
  const [l11, l21, l22] = factorOnDataScale(factor, slope);
  const isZero = { 0: Math.abs(l11) < BOUNDARY, 1: false, 2: Math.abs(l22) < BOUNDARY };
  if (!free.some((element) => isZero[element])) return null;
  if (!free.includes(1)) return { free: free.filter((element) => !isZero[element]), origin };
  if (!isZero[0]) return { free: [0, 1], origin };
  return { free: Math.hypot(l21, l22) < BOUNDARY ? [] : [2], origin: 0 };
}

/** Covariance of the random effects on the data's scale. */
export function randomEffects(
  factor: RelativeFactor,
  slope: SlopeCovariate | null,
  { residualVariance, correlated }: { residualVariance: number; correlated: boolean },
): RandomEffects {
  const [l11, l21, l22] = factorOnDataScale(factor, slope);
  const interceptVariance = residualVariance * l11 * l11;
  if (slope === null) return { interceptVariance, slopeVariance: null, covariance: null, correlation: null };
  const length = Math.hypot(l21, l22);
  const slopeVariance = residualVariance * length * length;
  if (!correlated) return { interceptVariance, slopeVariance, covariance: null, correlation: null };
  const covariance = residualVariance * l11 * l21;
  const exists = l11 > 0 && length > 0;
  return { interceptVariance, slopeVariance, covariance, correlation: exists ? l21 / length : null };
}
