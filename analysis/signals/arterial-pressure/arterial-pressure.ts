import { isClipped } from '../clipping.ts';
import { cautions } from '../../cautions/cautions.ts';
import type { Caution } from '../../cautions/cautions.ts';
import { mean, median } from '../../readings/summaries.ts';
import { upstrokes } from './upstrokes.ts';
import { SignalError } from '../signal-error.ts';
import { hasGap, samplingStep, segments, timeMean } from '../signal.ts';
import type { Segment, Signal } from '../signal.ts';
import { smoothed } from '../smooth.ts';
import { convert, sameDimension } from '../../units/convert.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';

/** One whole beat, from its foot to the next. Times in s, pressures in mm[Hg]. */
interface Beat {
  readonly start: number;
  readonly end: number;
  readonly systolic: number;
  readonly diastolic: number;
  /** Time average of the beat. */
  readonly mean: number;
}

export interface ArterialPressure {
  /** Time average of the whole record. */
  readonly timeMean: Quantity<'mm[Hg]'>;
  /** Time average of the whole beats alone. */
  readonly meanOfWholeBeats: Quantity<'mm[Hg]'>;
  readonly systolic: Quantity<'mm[Hg]'>;
  readonly diastolic: Quantity<'mm[Hg]'>;
  readonly heartRate: Quantity<'/min'>;
  readonly formFactor: Quantity<'1'>;
  /** Upstrokes found, those at the ends of the record and beside gaps among them. */
  readonly upstrokes: number;
  readonly beats: readonly Beat[];
  readonly duration: number;
  readonly samplingRate: number;
  readonly cautions: readonly Caution[];
}

/**
 * Beats of an arterial pressure record, and its true mean.
 *
 * Formula  mean (1/T)∫p dt; systolic and diastolic averaged over whole beats; heart rate 60 over the median interval between
 *          upstrokes; form factor (mean − diastolic)/(systolic − diastolic)
 * Units    signal in a unit of pressure; results mm[Hg], /min, 1
 * Shape    one signal; gaps cut it, and a beat that a gap touches is left out
 * Domain   sampled at 20 Hz or faster (100 for a good mean), highest pressure 25 to 400 mm[Hg], at least 2 whole beats (5 for a mean)
 * Errors   SignalError for a record that cannot be read so
 * Assumes  extremes are those of the samples, or of a parabola through 40 ms of them where noise would push them out
 * Source   definitions; one-third rule and form factor of Papaioannou 2016 Hypertens Res; own beat finder, see `upstrokes.ts`
 */
export function arterialPressure(signal: Signal): ArterialPressure {
  const pressure = inMillimetresOfMercury(signal);
  const step = samplingStep(pressure);
  if (!(step <= 0.05)) throw new SignalError('sampling_too_slow', 'Beats need at least 20 samples a second.');
  requireArterial(pressure);
  const stretches = segments(pressure, step);
  const found = stretches.map((stretch) => beatsOf(stretch));
  const beats = found.flatMap((each) => each.beats);
  if (beats.length < 2)
    throw new SignalError('too_few_beats', `Only ${beats.length} whole beats were found; two are needed.`);
  const record = timeMean(pressure, step);
  const systolic = mean(beats.map((beat) => beat.systolic));
  const diastolic = mean(beats.map((beat) => beat.diastolic));
  const beatTime = beats.reduce((sum, { start, end }) => sum + end - start, 0);
  return {
    timeMean: quantity(record),
    meanOfWholeBeats: quantity(
      beats.reduce((sum, beat) => sum + beat.mean * (beat.end - beat.start), 0) / beatTime,
    ),
    systolic: quantity(systolic),
    diastolic: quantity(diastolic),
    heartRate: quantity(60 / median(found.flatMap((each) => each.intervals))),
    formFactor: quantity((record - diastolic) / (systolic - diastolic)),
    upstrokes: found.reduce((sum, each) => sum + each.upstrokes, 0),
    beats,
    duration: pressure.times.at(-1)! - pressure.times[0]!,
    samplingRate: 1 / step,
    cautions: cautions([
      step > 0.01 * (1 + 1e-6) && 'WAVEFORM_SAMPLING',
      beats.length < 5 && 'WAVEFORM_SHORT',
      hasGap(pressure, step) && 'SIGNAL_GAP',
      stretches.some(isClipped) && 'CLIPPED_SIGNAL',
    ]),
  };
}

function beatsOf({ start, step, values }: Segment) {
  const smooth = smoothed(values, Math.round(0.02 / step));
  const strokes = upstrokes(smooth, step);
  const beats: Beat[] = [];
  const intervals: number[] = [];
  for (let i = 1; i < strokes.length; i++) {
    const [from, to] = [strokes[i - 1]!, strokes[i]!];
    const interval = (to.mark - from.mark) * step;
    if (interval > 3) continue;
    intervals.push(interval);
    beats.push(beatBetween(values, smooth, from.foot, to.foot, { start, step }));
  }
  return { beats, intervals, upstrokes: strokes.length };
}

function beatBetween(
  raw: Float64Array,
  smooth: Float64Array,
  foot: number,
  next: number,
  at: { start: number; step: number },
): Beat {
  let area = 0;
  let [rawHigh, smoothHigh, rawLow, smoothLow] = [-Infinity, -Infinity, Infinity, Infinity];
  for (let i = foot; i < next; i++) {
    area += (raw[i]! + raw[i + 1]!) / 2;
    rawHigh = Math.max(rawHigh, raw[i]!);
    smoothHigh = Math.max(smoothHigh, smooth[i]!);
    rawLow = Math.min(rawLow, raw[i]!);
    smoothLow = Math.min(smoothLow, smooth[i]!);
  }
  return {
    start: at.start + foot * at.step,
    end: at.start + next * at.step,
    // Smoothing takes noise off an extreme, and must not push a corner beyond the samples.
    systolic: Math.min(rawHigh, smoothHigh),
    diastolic: Math.max(rawLow, smoothLow),
    mean: area / (next - foot),
  };
}

function inMillimetresOfMercury({ times, values, unit }: Signal): Signal {
  if (!sameDimension(unit, 'mm[Hg]')) {
    throw new SignalError('unit_mismatch', `An arterial pressure cannot be in ${unit}.`);
  }
  const factor: number = convert(1, unit, 'mm[Hg]');
  return { times, unit: 'mm[Hg]', values: factor === 1 ? values : values.map((value) => value * factor) };
}

function requireArterial({ values }: Signal): void {
  const highest = values.reduce((most, value) => Math.max(most, value), -Infinity);
  if (highest >= 25 && highest <= 400) return;
  throw new SignalError(
    'implausible_values',
    `The highest pressure is ${highest.toPrecision(3)} mm[Hg]; arterial pressure reaches 25 to 400. Check unit and calibration.`,
  );
}
