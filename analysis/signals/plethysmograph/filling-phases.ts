import type { Segment, Signal } from '../signal.ts';

/** One inflation of the collecting cuff: from its onset to its release, in s. */
export interface FillingPhase {
  readonly onset: number;
  /** When the cuff has reached its pressure; the onset itself where no cuff channel says more. */
  readonly inflated: number;
  readonly release: number;
}

const shortestFilling = 2;

/**
 * Filling phases from the cuff-pressure channel.
 *
 * Formula  inflated while above half of the usual high pressure (90th percentile); onset at 10 % of it, inflated at 90 %
 * Units    times s, cuff pressure in any unit
 * Shape    phases in order; phases cut by the record's ends and shorter than 2 s are left out
 * Domain   the cuff is inflated for at least a tenth of the record
 * Errors   DomainError naming the argument; never NaN
 * Source   own rule
 */
export function fillingPhasesFromCuff({ times, values }: Signal): FillingPhase[] {
  const high = Float64Array.from(values).sort()[Math.floor(0.9 * (values.length - 1))]!;
  const phases: FillingPhase[] = [];
  for (let i = 1; i < values.length; i++) {
    if (!(values[i]! > high / 2 && values[i - 1]! <= high / 2)) continue;
    let onset = i;
    while (onset > 0 && values[onset - 1]! > 0.1 * high) onset--;
    let inflated = i;
    while (inflated < values.length - 1 && values[inflated]! < 0.9 * high) inflated++;
    let release = i;
    while (release < values.length && values[release]! > high / 2) release++;
    if (release === values.length) break;
    if (times[release]! - times[onset]! >= shortestFilling) {
      phases.push({ onset: times[onset]!, inflated: times[inflated]!, release: times[release]! });
    }
    i = release;
  }
  return phases;
}

/**
 * Filling phases from the volume trace alone: the rises between a trough and the next peak.
 *
 * Formula  turning points of the trace averaged over 1 s, each reversal larger than 0.4 of the trace's usual swing;
 *          the onset is where the line through a quarter and a half of the rise meets the trough
 * Units    times s, volume in any unit
 * Shape    an even stretch; a phase cut by an end of the record is left out
 * Domain   rises of at least 2 s
 * Errors   DomainError naming the argument; never NaN
 * Assumes  filling is slower than emptying; drift is smaller than the swing
 * Source   own rule
 */
export function fillingPhasesFromVolume(stretch: Segment): FillingPhase[] {
  const average = movingAverage(stretch.values, Math.max(1, Math.round(1 / stretch.step)));
  const ordered = Float64Array.from(average).sort();
  const swing =
    ordered[Math.floor(0.95 * (ordered.length - 1))]! - ordered[Math.floor(0.05 * (ordered.length - 1))]!;
  const turns = turningPoints(average, 0.4 * swing);
  const phases: FillingPhase[] = [];
  for (let i = 1; i < turns.length; i++) {
    const [from, to] = [turns[i - 1]!, turns[i]!];
    const rises = average[to]! > average[from]!;
    // The first and last turning points are ends of the record, not of a phase.
    if (!rises || i === turns.length - 1 || (to - from) * stretch.step < shortestFilling) continue;
    const onset = stretch.start + riseBegins(average, from, to) * stretch.step;
    phases.push({ onset, inflated: onset, release: stretch.start + to * stretch.step });
  }
  return phases;
}

/** Where a rise leaves its trough, which may be long and flat: a line through a quarter and a half of it, drawn back. */
function riseBegins(values: Float64Array, trough: number, peak: number): number {
  const height = values[peak]! - values[trough]!;
  const lastBelow = (share: number) => {
    let index = peak;
    while (index > trough && values[index]! > values[trough]! + share * height) index--;
    return index;
  };
  const quarter = lastBelow(0.25);
  return Math.max(trough, 2 * quarter - lastBelow(0.5));
}

function movingAverage(values: Float64Array, width: number): Float64Array {
  const half = width >> 1;
  const sums = new Float64Array(values.length + 1);
  for (let i = 0; i < values.length; i++) sums[i + 1] = sums[i]! + values[i]!;
  return values.map((_, i) => {
    const reach = Math.min(half, i, values.length - 1 - i);
    return (sums[i + reach + 1]! - sums[i - reach]!) / (2 * reach + 1);
  });
}

/** Ends and reversals of a zigzag whose swings all exceed a size. */
function turningPoints(values: Float64Array, size: number): number[] {
  const turns = [0];
  let [low, high, direction] = [0, 0, 0];
  for (let i = 1; i < values.length; i++) {
    if (values[i]! < values[low]!) low = i;
    if (values[i]! > values[high]!) high = i;
    if (direction >= 0 && values[high]! - values[i]! > size) {
      turns.push(high);
      [direction, low] = [-1, i];
      high = i;
    } else if (direction <= 0 && values[i]! - values[low]! > size) {
      turns.push(low);
      [direction, high] = [1, i];
      low = i;
    }
  }
  turns.push(values.length - 1);
  return turns;
}
