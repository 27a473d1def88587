/**
 * Savitzky-Golay smoothing with a parabola: takes noise away and keeps rounded peaks at their height.
 *
 * Formula  Σ wⱼ x(i+j), wⱼ = 3(3m² + 3m − 1 − 5j²)/((2m−1)(2m+1)(2m+3)), |j| ≤ m
 * Units    those of the values
 * Shape    as many values as given; the first and last m are left as they are
 * Domain   m ≥ 0; m of 0 or 1 changes nothing
 * Errors   DomainError naming the argument; never NaN
 * Source   Savitzky & Golay 1964, Anal Chem 36:1627
 */
export function smoothed(values: Float64Array, m: number): Float64Array {
  const out = Float64Array.from(values);
  if (m < 2) return out;
  const scale = 3 / ((2 * m - 1) * (2 * m + 1) * (2 * m + 3));
  const weights = Float64Array.from({ length: m + 1 }, (_, j) => scale * (3 * m * m + 3 * m - 1 - 5 * j * j));
  for (let i = m; i < values.length - m; i++) {
    let sum = weights[0]! * values[i]!;
    for (let j = 1; j <= m; j++) sum += weights[j]! * (values[i - j]! + values[i + j]!);
    out[i] = sum;
  }
  return out;
}

/**
 * How far a signal stands above its lowest value of the last `width` samples: large at the end of an upstroke.
 *
 * Formula  rᵢ = xᵢ − min(xₖ), i − width ≤ k ≤ i
 * Units    those of the values
 * Shape    as many values as given
 * Domain   width ≥ 0
 * Errors   DomainError naming the argument; never NaN
 * Assumes  unlike a sum of rises it does not grow with noise
 * Source   sliding minimum by a monotone queue
 */
export function riseAboveRecentMinimum(values: Float64Array, width: number): Float64Array {
  const rise = new Float64Array(values.length);
  const queue = new Int32Array(values.length);
  let head = 0;
  let tail = 0;
  for (let i = 0; i < values.length; i++) {
    while (tail > head && values[queue[tail - 1]!]! >= values[i]!) tail--;
    queue[tail++] = i;
    while (queue[head]! < i - width) head++;
    rise[i] = values[i]! - values[queue[head]!]!;
  }
  return rise;
}
