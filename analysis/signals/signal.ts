/** One sampled quantity; times in s, strictly rising. A missing sample is absent, which leaves a longer step. */
export interface Signal {
  readonly times: Float64Array;
  readonly values: Float64Array;
  /** UCUM code of the values. */
  readonly unit: string;
}

/** A stretch without gaps on an even grid, so that windows are counts of samples. */
export interface Segment {
  readonly start: number;
  readonly step: number;
  readonly values: Float64Array;
}

/** Usual time between samples: the median step. */
export function samplingStep({ times }: Signal): number {
  const steps = new Float64Array(Math.max(1, times.length - 1));
  for (let i = 1; i < times.length; i++) steps[i - 1] = times[i]! - times[i - 1]!;
  const usual = steps.sort()[steps.length >> 1]!;
  // The mean step of an even record has fewer rounding errors than any single one.
  const average = (times.at(-1)! - times[0]!) / (times.length - 1);
  return Math.abs(average / usual - 1) < 1e-6 ? average : usual;
}

/**
 * Cuts a signal at its gaps and puts each stretch on an even grid by linear interpolation.
 *
 * Formula  a step is a gap when it exceeds 3 usual steps and 60 ms
 * Units    times s; values as they came
 * Shape    a signal of n samples gives stretches in order; stretches of one sample are dropped
 * Domain   times strictly rising
 * Errors   DomainError naming the argument; never NaN
 * Assumes  shorter holes may be bridged by a line; the pulse of an artery needs 100 Hz
 * Source   common practice
 */
export function segments(signal: Signal, step = samplingStep(signal)): Segment[] {
  const { times, values } = signal;
  const longest = Math.max(3 * step, 0.06);
  const found: Segment[] = [];
  let first = 0;
  for (let i = 1; i <= times.length; i++) {
    if (i < times.length && times[i]! - times[i - 1]! <= longest) continue;
    if (i - first > 1) found.push(evenGrid(times.subarray(first, i), values.subarray(first, i), step));
    first = i;
  }
  return found;
}

function evenGrid(times: Float64Array, values: Float64Array, step: number): Segment {
  const start = times[0]!;
  const count = Math.floor((times.at(-1)! - start) / step + 1e-6) + 1;
  const even = new Float64Array(count);
  let right = 1;
  for (let i = 0; i < count; i++) {
    const time = start + i * step;
    while (right < times.length - 1 && times[right]! < time) right++;
    const before = times[right - 1]!;
    const share = (time - before) / (times[right]! - before);
    // A sample that lies on the grid keeps its very value, so that plateaus and digits stay what they were.
    if (share < 1e-6) even[i] = values[right - 1]!;
    else if (share > 1 - 1e-6) even[i] = values[right]!;
    else even[i] = values[right - 1]! + share * (values[right]! - values[right - 1]!);
  }
  return { start, step, values: even };
}

/**
 * Time average of a signal over its stretches; gaps count neither as time nor as value.
 *
 * Formula  Σ trapezoids / Σ steps, over steps that are no gap
 * Units    those of the values
 * Shape    scalars
 * Domain   at least 2 samples without a gap between them
 * Errors   DomainError naming the argument; never NaN
 * Source   definition
 */
export function timeMean(signal: Signal, step = samplingStep(signal)): number {
  const { times, values } = signal;
  const longest = Math.max(3 * step, 0.06);
  let area = 0;
  let covered = 0;
  for (let i = 1; i < times.length; i++) {
    const width = times[i]! - times[i - 1]!;
    if (width > longest) continue;
    area += (width * (values[i]! + values[i - 1]!)) / 2;
    covered += width;
  }
  return area / covered;
}

/** Whether samples are missing somewhere. */
export function hasGap(signal: Signal, step = samplingStep(signal)): boolean {
  const longest = Math.max(3 * step, 0.06);
  return signal.times.some((time, index) => index > 0 && time - signal.times[index - 1]! > longest);
}
