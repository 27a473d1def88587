import { mean } from '../../readings/summaries.ts';
import { requireCount, requireTimeSeries } from '../../units/require.ts';

export interface FittedLine {
  readonly slope: number;
  readonly intercept: number;
  /** Standard error of the slope; absent for two points, which leave no residual. */
  readonly standardError: number | undefined;
  readonly rSquared: number;
}

/**
 * Ordinary least-squares line through values against time.
 *
 * Formula  b = Σ(t−t̄)(v−v̄) / Σ(t−t̄)²; SE = √(RSS/(n−2)) / √Σ(t−t̄)²
 * Units    value per unit of time
 * Shape    two series of the same length, at least 2 points
 * Domain   finite; times strictly rising
 * Errors   DomainError naming the argument; never NaN
 * Assumes  independent residuals. A pulse makes them autocorrelated, so this SE is optimistic: show it, do not infer from it
 * Source   textbook least squares; reference case hd-003
 */
export function leastSquaresLine(
  times: readonly number[],
  values: readonly number[],
  argument = 'values',
): FittedLine {
  requireCount(argument, values, 2);
  requireTimeSeries(times, argument, values);
  const n = times.length;
  const meanTime = mean(times);
  const meanValue = mean(values);
  let timeSquares = 0;
  let products = 0;
  let valueSquares = 0;
  for (let i = 0; i < n; i++) {
    const time = times[i]! - meanTime;
    const value = values[i]! - meanValue;
    timeSquares += time * time;
    products += time * value;
    valueSquares += value * value;
  }
  const slope = products / timeSquares;
  let residualSquares = 0;
  for (let i = 0; i < n; i++)
    residualSquares += (values[i]! - meanValue - slope * (times[i]! - meanTime)) ** 2;
  return {
    slope,
    intercept: meanValue - slope * meanTime,
    standardError: n > 2 ? Math.sqrt(residualSquares / (n - 2) / timeSquares) : undefined,
    rSquared: valueSquares === 0 ? 1 : 1 - residualSquares / valueSquares,
  };
}
