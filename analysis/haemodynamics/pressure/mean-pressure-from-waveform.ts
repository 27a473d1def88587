import { trapezoidArea } from '../trapezoid-area.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';

/**
 * Mean pressure as the time average of a sampled waveform.
 *
 * Formula  MAP = (1/T) ∫ p dt, trapezoidal
 * Units    t s, p mm[Hg]
 * Shape    two series of one length, at least 2 samples
 * Domain   times strictly rising, finite pressures
 * Errors   DomainError naming the argument; never NaN
 * Assumes  the record spans whole beats, is not clipped, and is sampled at 100 Hz or faster
 * Source   definition; reference case hd-015
 */
export function meanPressureFromWaveform(
  times: readonly Quantity<'s'>[],
  pressures: readonly Quantity<'mm[Hg]'>[],
): Quantity<'mm[Hg]'> {
  const area = trapezoidArea(times, pressures, 'pressures');
  return quantity(area / (times.at(-1)! - times[0]!));
}
