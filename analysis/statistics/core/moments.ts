/**
 * Means and sums of squares that keep their digits for 1e8 ± small differences and for 1e-9: one value of the data is
 * subtracted from all before any sum, then they are centred.
 *
 * Shape    arrays of finite numbers, not empty; the variance needs two
 */
export function mean(values: ArrayLike<number>): number {
  const shift = values[0]!;
  let sum = 0;
  for (let i = 0; i < values.length; i += 1) sum += values[i]! - shift;
  return shift + sum / values.length;
}

/** The values minus their mean. */
export function centred(values: ArrayLike<number>): Float64Array {
  const shift = values[0]!;
  const result = new Float64Array(values.length);
  let sum = 0;
  for (let i = 0; i < values.length; i += 1) {
    result[i] = values[i]! - shift;
    sum += result[i]!;
  }
  const centre = sum / values.length;
  for (let i = 0; i < result.length; i += 1) result[i]! -= centre;
  return result;
}

/** Sum of products of deviations from the means. */
export function sumOfProducts(x: ArrayLike<number>, y: ArrayLike<number>): number {
  const a = centred(x);
  const b = x === y ? a : centred(y);
  let sum = 0;
  let restA = 0;
  let restB = 0;
  for (let i = 0; i < a.length; i += 1) {
    sum += a[i]! * b[i]!;
    restA += a[i]!;
    restB += b[i]!;
  }
  return sum - (restA * restB) / a.length;
}

export function sumOfSquares(values: ArrayLike<number>): number {
  return sumOfProducts(values, values);
}

/** Divisor n − 1. */
export function variance(values: ArrayLike<number>): number {
  return sumOfSquares(values) / (values.length - 1);
}

/** Divisor n − 1. */
export function standardDeviation(values: ArrayLike<number>): number {
  return Math.sqrt(variance(values));
}

/** Pearson's correlation; null if one side does not vary. */
export function correlation(x: ArrayLike<number>, y: ArrayLike<number>): number | null {
  const squares = Math.sqrt(sumOfSquares(x)) * Math.sqrt(sumOfSquares(y));
  if (!(squares > 0)) return null;
  return Math.max(-1, Math.min(1, sumOfProducts(x, y) / squares));
}

/** Middle value, or the mean of the two middle ones. */
export function median(values: ArrayLike<number>): number {
  const sorted = Float64Array.from(values).sort();
  const half = sorted.length >> 1;
  return sorted.length % 2 === 1 ? sorted[half]! : (sorted[half - 1]! + sorted[half]!) / 2;
}
