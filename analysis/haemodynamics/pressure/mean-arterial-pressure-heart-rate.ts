import { pulsePressure } from './pulse-pressure.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireWithin } from '../../units/require.ts';

/**
 * Mean arterial pressure with a form factor that rises with heart rate.
 *
 * Formula  MAP = DBP + (0.33 + 0.0012 HR) · PP
 * Units    pressures mm[Hg], HR /min
 * Shape    scalars
 * Domain   SBP > DBP; HR > 0, derived for 40 to 150
 * Errors   DomainError naming the argument; never NaN
 * Assumes  derived and validated on central aortic catheter pressures; a brachial cuff extrapolates
 * Source   Moran 1995 (from memory); Razminia et al. 2004, Catheter Cardiovasc Interv 63:419; reference case hd-012
 */
export function meanArterialPressureHeartRate(
  systolicPressure: Quantity<'mm[Hg]'>,
  diastolicPressure: Quantity<'mm[Hg]'>,
  heartRate: Quantity<'/min'>,
): Quantity<'mm[Hg]'> {
  requireWithin('heartRate', heartRate, 20, 250);
  return quantity(
    diastolicPressure + (0.33 + 0.0012 * heartRate) * pulsePressure(systolicPressure, diastolicPressure),
  );
}
