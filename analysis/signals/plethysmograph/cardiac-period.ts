/**
 * Period of the arterial pulse that rides on a filling limb, or nothing where no pulse is clear.
 *
 * Formula  lag of the highest autocorrelation of the detrended trace between 0.3 and 2 s, if it exceeds 0.5
 * Units    values in any unit, result s
 * Shape    an even stretch of at least 3 s
 * Domain   30 to 200 beats a minute
 * Errors   DomainError naming the argument; never NaN
 * Assumes  a steady rhythm over the stretch
 * Source   own rule
 */
export function cardiacPeriod(values: Float64Array, step: number): number | undefined {
  if (values.length * step < 3) return undefined;
  const fine = withoutParabola(values);
  // The search runs on averages of 20 ms, and only its neighbourhood on the samples themselves.
  const width = Math.max(1, Math.floor(0.02 / step));
  const coarse = blockMeans(fine, width);
  const lag = bestLag(coarse, Math.ceil(0.3 / (step * width)), Math.floor(2 / (step * width)));
  if (lag === undefined) return undefined;
  let best = lag * width;
  for (let near = (lag - 1) * width; near <= (lag + 1) * width; near++) {
    if (correlationAt(fine, near) > correlationAt(fine, best)) best = near;
  }
  return best * step;
}

/** First lag whose correlation stands out; a multiple of the period correlates as well, so a later one must be clearly better. */
function bestLag(values: Float64Array, first: number, longest: number): number | undefined {
  const last = Math.min(longest, values.length >> 1);
  let best: { lag?: number; value: number } = { value: 0.5 };
  for (let lag = first; lag < last; lag++) {
    const value = correlationAt(values, lag);
    const isPeak = value >= correlationAt(values, lag - 1) && value >= correlationAt(values, lag + 1);
    if (isPeak && value > best.value * (best.lag === undefined ? 1 : 1.1)) best = { lag, value };
  }
  return best.lag;
}

function correlationAt(values: Float64Array, lag: number): number {
  let [products, left, right] = [0, 0, 0];
  for (let i = lag; i < values.length; i++) {
    products += values[i]! * values[i - lag]!;
    left += values[i]! ** 2;
    right += values[i - lag]! ** 2;
  }
  return products / Math.sqrt(left * right);
}

function blockMeans(values: Float64Array, width: number): Float64Array {
  return Float64Array.from({ length: Math.floor(values.length / width) }, (_, block) => {
    let sum = 0;
    for (let i = block * width; i < (block + 1) * width; i++) sum += values[i]!;
    return sum / width;
  });
}

function withoutParabola(values: Float64Array): Float64Array {
  const n = values.length;
  const at = (i: number) => (2 * i) / (n - 1) - 1;
  // Legendre polynomials are orthogonal enough on an even grid for a detrend.
  const basis = [() => 1, (x: number) => x, (x: number) => 1.5 * x * x - 0.5];
  const rest = Float64Array.from(values);
  for (const polynomial of basis) {
    let [projection, norm] = [0, 0];
    for (let i = 0; i < n; i++) {
      projection += rest[i]! * polynomial(at(i));
      norm += polynomial(at(i)) ** 2;
    }
    for (let i = 0; i < n; i++) rest[i] = rest[i]! - (projection / norm) * polynomial(at(i));
  }
  return rest;
}

/**
 * First foot of the pulse on a filling limb, so that a window from foot to foot carries no slope of the pulse.
 *
 * Formula  index of the lowest of the first period's samples after the trend between periods is taken off
 * Units    index
 * Shape    an even stretch longer than one period
 * Domain   period in whole samples, at least 1
 * Errors   none
 * Source   own rule
 */
export function firstFoot(values: Float64Array, period: number): number {
  const count = values.length - period;
  let trend = 0;
  for (let i = 0; i < count; i++) trend += (values[i + period]! - values[i]!) / period / count;
  let foot = 0;
  for (let i = 1; i < Math.min(period, values.length); i++) {
    if (values[i]! - trend * i < values[foot]! - trend * foot) foot = i;
  }
  return foot;
}
