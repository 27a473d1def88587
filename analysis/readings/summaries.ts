import { requireCount } from '../units/require.ts';

/**
 * Arithmetic mean, taken about the first value so that large offsets cost no digits.
 *
 * Formula  x₁ + Σ(xᵢ−x₁)/n
 * Units    those of the values
 * Shape    one series, at least 1 value
 * Domain   finite
 * Errors   DomainError naming the argument; never NaN
 * Source   definition
 */
export function mean(values: readonly number[]): number {
  requireCount('values', values, 1);
  const first = values[0]!;
  return first + values.reduce((sum, value) => sum + (value - first), 0) / values.length;
}

/**
 * Sample standard deviation with divisor n − 1.
 *
 * Formula  √(Σ(x−x̄)²/(n−1))
 * Units    those of the values
 * Shape    one series, at least 2 values
 * Domain   finite
 * Errors   DomainError naming the argument; never NaN
 * Source   definition
 */
export function standardDeviation(values: readonly number[]): number {
  requireCount('values', values, 2);
  const centre = mean(values);
  return Math.sqrt(values.reduce((sum, value) => sum + (value - centre) ** 2, 0) / (values.length - 1));
}

/**
 * Median: the middle value, or the mean of the two middle ones.
 *
 * Formula  x₍ₙ₊₁₎/₂, or (xₙ/₂ + xₙ/₂₊₁)/2 of the ordered values
 * Units    those of the values
 * Shape    one series, at least 1 value
 * Domain   finite
 * Errors   DomainError naming the argument; never NaN
 * Source   definition
 */
export function median(values: readonly number[]): number {
  requireCount('values', values, 1);
  const ordered = [...values].sort((a, b) => a - b);
  const middle = Math.floor(ordered.length / 2);
  return ordered.length % 2 === 1 ? ordered[middle]! : (ordered[middle - 1]! + ordered[middle]!) / 2;
}
