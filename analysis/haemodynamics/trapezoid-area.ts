import { requireCount, requireTimeSeries } from '../units/require.ts';

/**
 * Area under a curve by the trapezoidal rule on irregular times; nothing is extrapolated.
 *
 * Formula  Σ (tᵢ₊₁ − tᵢ)(yᵢ + yᵢ₊₁)/2
 * Units    unit of y times unit of t
 * Shape    two series of one length, at least 2 points
 * Domain   finite; times strictly rising
 * Errors   DomainError naming the argument; never NaN
 * Source   definition; reference case hd-110
 */
export function trapezoidArea(
  times: readonly number[],
  values: readonly number[],
  argument = 'values',
): number {
  requireCount(argument, values, 2);
  requireTimeSeries(times, argument, values);
  let area = 0;
  for (let i = 1; i < times.length; i++)
    area += ((times[i]! - times[i - 1]!) * (values[i]! + values[i - 1]!)) / 2;
  return area;
}
