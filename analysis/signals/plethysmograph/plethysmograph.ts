import { isClipped } from '../clipping.ts';
import { cautions } from '../../cautions/cautions.ts';
import type { Caution, CautionCode } from '../../cautions/cautions.ts';
import { leastSquaresLine } from '../../haemodynamics/plethysmography/least-squares-line.ts';
import { cardiacPeriod, firstFoot } from './cardiac-period.ts';
import { fillingPhasesFromCuff, fillingPhasesFromVolume } from './filling-phases.ts';
import type { FillingPhase } from './filling-phases.ts';
import { SignalError } from '../signal-error.ts';
import { samplingStep, segments } from '../signal.ts';
import type { Segment, Signal } from '../signal.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive, requireWithin } from '../../units/require.ts';

/** A step of the signal that stands for a known volume change, at the gain of the readings. */
interface Calibration {
  readonly deflection: number;
  readonly percent: number;
}

export interface PlethysmographOptions {
  /** Cuff pressure, where it was recorded; else filling is found in the volume trace. */
  readonly cuff?: Signal;
  /** Needed unless the signal is in percent of limb volume. */
  readonly calibration?: Calibration;
  /** Seconds left out after the onset of inflation: the cuff artefact. */
  readonly skip?: number;
  /** Heart beats that the line spans: 3 at rest, 1 in hyperaemia. */
  readonly cycles?: number;
  /** Seconds that the line spans where no pulse is clear: 4 at rest, 1 to 2 in hyperaemia. */
  readonly fixedWindow?: number;
}

/** One filling phase with its line. A reading is a proposal: a person accepts or rejects it. */
export interface SlopeReading {
  readonly phase: FillingPhase;
  readonly window: { readonly start: number; readonly end: number };
  /** Slope of relative limb volume; its error is optimistic because the pulse autocorrelates the residuals. */
  readonly slope: Quantity<'%/s'>;
  readonly standardError: Quantity<'%/s'>;
  readonly rSquared: number;
  /** Absent where the volume does not rise: a bad trace has no flow. */
  readonly flow: Quantity<'mL/min/dL'> | undefined;
  readonly flowStandardError: Quantity<'mL/min/dL'>;
  /** False where the volume does not rise, two checks of quality fail or the flow is above 100: until a person has looked. */
  readonly usable: boolean;
  readonly cautions: readonly Caution[];
}

export const slopeVersion = 1;

/**
 * Blood flow from a venous-occlusion plethysmograph record: one line for each filling phase.
 *
 * Formula  flow = 60 · OLS slope in %/s over the first N heart beats after the cuff artefact, whole periods so that the pulse does
 *          not bias it; without a clear pulse over a fixed window
 * Units    volume in % or any signal unit with a calibration; flow mL/min/dL
 * Shape    one reading a filling phase, in order
 * Domain   sampled at 20 Hz or faster; skip 0 to 5 s, cycles 1 to 6, window 1 to 10 s
 * Errors   SignalError for a record that cannot be read so, DomainError for options outside their domain
 * Assumes  collecting cuff below diastolic pressure, hand excluded, gain as at calibration
 * Source   window and cautions of haemodynamics reference 1.2 (common practice; Junejo et al. 2019, Eur J Appl Physiol)
 */
export function plethysmographReadings(signal: Signal, options: PlethysmographOptions = {}): SlopeReading[] {
  const { cuff, skip = 1, cycles = 3, fixedWindow = 4 } = options;
  requireWithin('skip', skip, 0, 5);
  requireWithin('cycles', cycles, 1, 6);
  requireWithin('fixedWindow', fixedWindow, 1, 10);
  const volume = inPercent(signal, options.calibration);
  const step = samplingStep(volume);
  if (!(step <= 0.05))
    throw new SignalError('sampling_too_slow', 'Slopes need at least 20 samples a second.');
  const stretches = segments(volume, step);
  const clipped = stretches.some(isClipped);
  const cuffPhases = cuff && fillingPhasesFromCuff(cuff);
  const readings = stretches.flatMap((stretch) =>
    (cuffPhases ?? fillingPhasesFromVolume(stretch)).flatMap((phase) => {
      const reading = readingOf(stretch, phase, { skip, cycles, fixedWindow, clipped });
      return reading ? [reading] : [];
    }),
  );
  if (readings.length === 0) {
    throw new SignalError('no_filling_phase', 'No filling phase of two seconds or more was found.');
  }
  return readings;
}

interface WindowOptions {
  readonly skip: number;
  readonly cycles: number;
  readonly fixedWindow: number;
  readonly clipped: boolean;
}

function readingOf(stretch: Segment, phase: FillingPhase, options: WindowOptions): SlopeReading | undefined {
  const index = (time: number) => Math.round((time - stretch.start) / stretch.step);
  const first = index(Math.max(phase.onset + options.skip, phase.inflated));
  const last = index(phase.release);
  if (index(phase.onset) < 0 || last >= stretch.values.length || last - first < 2) return undefined;
  const filling = stretch.values.subarray(first, last + 1);
  const { from, length, period } = windowIn(filling, stretch.step, options);
  const line = lineOver(stretch, first + from, first + from + length);
  const before = driftBefore(stretch, index(phase.onset), period);
  const fails: CautionCode[] = [];
  if (line.rSquared < 0.9) fails.push('SLOPE_FIT');
  if (before !== undefined && Math.abs(before) > 0.1 * Math.abs(line.slope)) fails.push('BASELINE_DRIFT');
  if (options.clipped) fails.push('CLIPPED_SIGNAL');
  const rises = line.slope > 0;
  const tooHigh = 60 * line.slope > 100;
  const start = stretch.start + (first + from) * stretch.step;
  return {
    phase,
    window: { start, end: start + length * stretch.step },
    slope: quantity(line.slope),
    standardError: quantity(line.standardError ?? 0),
    rSquared: line.rSquared,
    flow: rises ? quantity(60 * line.slope) : undefined,
    flowStandardError: quantity(60 * (line.standardError ?? 0)),
    usable: rises && fails.length < 2 && !tooHigh,
    cautions: cautions([...fails, period === undefined && 'FIXED_WINDOW', tooHigh && 'FLOW_UNCONFIRMED']),
  };
}

/** Whole beats from the first foot where a pulse is clear and they fit, else a fixed time. */
function windowIn(filling: Float64Array, step: number, { cycles, fixedWindow }: WindowOptions) {
  const available = filling.length - 1;
  const seconds = cardiacPeriod(filling, step);
  if (seconds !== undefined) {
    const from = firstFoot(filling, Math.round(seconds / step));
    const beats = Math.min(cycles, Math.floor(((available - from) * step) / seconds));
    if (beats >= 1)
      return { from, length: Math.round((beats * seconds) / step), period: Math.round(seconds / step) };
  }
  return { from: 0, length: Math.min(Math.round(fixedWindow / step), available), period: undefined };
}

function lineOver({ step, values }: Segment, from: number, to: number) {
  const y = Array.from(values.subarray(from, to + 1));
  return leastSquaresLine(
    y.map((_, i) => i * step),
    y,
    'volume',
  );
}

/** Drift in the second before inflation, where there is one: between samples one period apart where a pulse is clear. */
function driftBefore(stretch: Segment, onset: number, period: number | undefined): number | undefined {
  const second = Math.round(1 / stretch.step);
  if (period === undefined)
    return onset < second ? undefined : lineOver(stretch, onset - second, onset - 1).slope;
  if (onset < second + period) return undefined;
  let rise = 0;
  for (let i = onset - second; i < onset; i++) rise += stretch.values[i]! - stretch.values[i - period]!;
  return rise / second / (period * stretch.step);
}

function inPercent({ times, values, unit }: Signal, calibration: Calibration | undefined): Signal {
  // Other dimensionless units may be arbitrary ones, which mean nothing without a calibration.
  if ((unit === '%' || unit === 'mL/dL') && calibration === undefined) return { times, values, unit: '%' };
  if (calibration === undefined) {
    throw new SignalError(
      'calibration_missing',
      `A signal in ${unit} needs the deflection and percent of a calibration step.`,
    );
  }
  const { deflection, percent } = calibration;
  requirePositive('calibration percent', percent);
  requirePositive('calibration deflection', Math.abs(deflection));
  return { times, unit: '%', values: values.map((value) => (value * percent) / deflection) };
}
