import { riseAboveRecentMinimum } from '../smooth.ts';

/** One upstroke of arterial pressure, by sample index. */
export interface Upstroke {
  readonly foot: number;
  /** Steepest point, between samples: the time mark of the beat. */
  readonly mark: number;
}

const blockSeconds = 2;
const neighbours = 5;
const shortestInterval = 0.24;
const leastPulse = 3;

/**
 * Finds the upstroke of each beat in an even stretch of arterial pressure.
 *
 * Formula  upstroke where the rise above the minimum of the last 0.2 s exceeds 0.45 of the usual largest rise nearby (60th
 *          percentile of the maxima of 2 s blocks within 10 s); two within 0.24 s are one, the larger rise stays
 * Units    mm[Hg] on an even grid
 * Shape    one stretch; upstrokes in order
 * Domain   pulses of at least 3 mm[Hg], 20 to 250 beats a minute
 * Errors   DomainError naming the argument; never NaN
 * Assumes  a dicrotic wave rises by less than 0.45 of the systolic upstroke; drift and noise change no rise much
 * Source   own algorithm; checked on record 03700181 of the MIMIC Database (Moody & Mark 1996) against an ECG detector's marks
 */
export function upstrokes(pressure: Float64Array, step: number): Upstroke[] {
  const rise = riseAboveRecentMinimum(pressure, Math.round(0.2 / step));
  const limits = thresholds(rise, Math.max(1, Math.round(blockSeconds / step)));
  const found: (Upstroke & { readonly rise: number })[] = [];
  for (let i = 0; i < rise.length; i++) {
    if (rise[i]! <= limits(i)) continue;
    let top = i;
    while (i < rise.length && rise[i]! > limits(i)) {
      if (rise[i]! > rise[top]!) top = i;
      i++;
    }
    const ending = upstrokeEndingAt(pressure, top, Math.round(0.2 / step));
    // Steepest at the very first sample: the record begins inside this upstroke, and its foot is not there.
    if (ending.mark < 1) continue;
    const stroke = { ...ending, rise: rise[top]! };
    const previous = found.at(-1);
    if (previous && (stroke.mark - previous.mark) * step < shortestInterval) {
      if (stroke.rise > previous.rise) found[found.length - 1] = stroke;
    } else found.push(stroke);
  }
  return found;
}

/** The threshold at each sample: follows the size of pulses nearby, and is out of reach where there are none. */
function thresholds(rise: Float64Array, block: number): (index: number) => number {
  const largest = Array.from({ length: Math.ceil(rise.length / block) }, (_, b) =>
    rise.subarray(b * block, (b + 1) * block).reduce((most, value) => Math.max(most, value), 0),
  );
  const limits = largest.map((_, b) => {
    const nearby = largest.slice(Math.max(0, b - neighbours), b + neighbours + 1).sort((x, y) => x - y);
    const usual = nearby[Math.floor(0.6 * (nearby.length - 1))]!;
    return usual < leastPulse ? Infinity : 0.45 * usual;
  });
  return (index) => limits[Math.floor(index / block)]!;
}

function upstrokeEndingAt(pressure: Float64Array, top: number, width: number): Upstroke {
  let foot = top;
  for (let i = top; i >= Math.max(0, top - width); i--) if (pressure[i]! < pressure[foot]!) foot = i;
  const slope = (i: number) => (pressure[i + 1] ?? pressure[i]!) - pressure[i]!;
  let steepest = foot;
  for (let i = foot; i < top; i++) if (slope(i) > slope(steepest)) steepest = i;
  const [left, middle, right] = [slope(steepest - 1), slope(steepest), slope(steepest + 1)];
  const bend = left - 2 * middle + right;
  const shift = Number.isFinite(left) && bend < 0 ? (left - right) / (2 * bend) : 0;
  return { foot, mark: steepest + 0.5 + Math.max(-0.5, Math.min(0.5, shift)) };
}
