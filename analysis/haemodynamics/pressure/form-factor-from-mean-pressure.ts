import { pulsePressure } from './pulse-pressure.ts';
import { DomainError } from '../../units/errors.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';

/**
 * Measured form factor, from an independent mean pressure.
 *
 * Formula  k = (MAP − DBP) / PP
 * Units    pressures mm[Hg], k 1
 * Shape    scalars
 * Domain   DBP < MAP < SBP
 * Errors   DomainError naming the argument; never NaN
 * Assumes  MAP measured independently (waveform or device), not computed from the same two pressures
 * Source   definition; reference case hd-016
 */
export function formFactorFromMeanPressure(
  systolicPressure: Quantity<'mm[Hg]'>,
  diastolicPressure: Quantity<'mm[Hg]'>,
  meanArterialPressure: Quantity<'mm[Hg]'>,
): Quantity<'1'> {
  const swing = pulsePressure(systolicPressure, diastolicPressure);
  if (!(meanArterialPressure > diastolicPressure && meanArterialPressure < systolicPressure)) {
    throw new DomainError(
      'meanArterialPressure',
      `between diastolic (${diastolicPressure}) and systolic (${systolicPressure})`,
      meanArterialPressure,
    );
  }
  return quantity((meanArterialPressure - diastolicPressure) / swing);
}
