import { mean, standardDeviation } from '../../readings/summaries.ts';
import {
  requireCount,
  requireEachPositive,
  requireNotNegative,
  requirePositive,
} from '../../units/require.ts';

/** A mean with the relative variance of that mean, on the log scale, and its degrees of freedom. */
export interface Measurement {
  readonly estimate: number;
  readonly relativeVariance: number;
  readonly df: number;
}

/**
 * A measurement from replicate readings.
 *
 * Formula  mean; (SD/(mean √n))², df n − 1
 * Units    those of the readings
 * Shape    one series, at least 2 readings
 * Domain   each > 0
 * Errors   DomainError naming the argument; never NaN
 * Assumes  independent readings
 * Source   propagation of errors
 */
export function measurementOfReadings(argument: string, readings: readonly number[]): Measurement {
  requireCount(
    argument,
    readings,
    2,
    'One reading shows no spread: give the laboratory’s own deviation instead.',
  );
  requireEachPositive(argument, readings);
  const estimate = mean(readings);
  return {
    estimate,
    relativeVariance: (standardDeviation(readings) / estimate) ** 2 / readings.length,
    df: readings.length - 1,
  };
}

/**
 * A measurement whose spread is known from the laboratory's own replicates.
 *
 * Formula  (s/(x √n))², df of s
 * Units    x and s in one unit
 * Shape    scalars
 * Domain   x > 0, s ≥ 0, n ≥ 1
 * Errors   DomainError naming the argument; never NaN
 * Source   propagation of errors
 */
export function measurementOfKnownSpread(
  argument: string,
  estimate: number,
  deviation: number,
  { replicates = 1, df = Infinity } = {},
): Measurement {
  requirePositive(argument, estimate);
  requireNotNegative(`${argument} deviation`, deviation);
  return { estimate, relativeVariance: (deviation / estimate) ** 2 / replicates, df };
}

/**
 * Degrees of freedom of a sum of independent variances.
 *
 * Formula  (Σ vᵢ)² / Σ vᵢ²/dfᵢ
 * Shape    scalars
 * Domain   vᵢ ≥ 0, dfᵢ > 0; infinite when every vᵢ is 0
 * Errors   DomainError naming the argument; never NaN
 * Source   Welch 1947; Satterthwaite 1946
 */
export function effectiveDegreesOfFreedom(
  parts: readonly { readonly variance: number; readonly df: number }[],
): number {
  const total = parts.reduce((sum, { variance }) => sum + variance, 0);
  const weighted = parts.reduce((sum, { variance, df }) => sum + variance ** 2 / df, 0);
  return weighted === 0 ? Infinity : total ** 2 / weighted;
}
