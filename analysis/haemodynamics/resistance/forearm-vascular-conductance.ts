import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive } from '../../units/require.ts';

/**
 * Forearm vascular conductance: the inverse of resistance, and the better index where flow changes more than pressure.
 *
 * Formula  FVC = FBF / MAP
 * Units    FBF mL/min/dL, MAP mm[Hg], FVC mL/min/dL/mm[Hg] (stored unscaled)
 * Shape    scalars
 * Domain   MAP > 0, FBF > 0
 * Errors   DomainError naming the argument; never NaN
 * Assumes  venous pressure neglected by convention
 * Source   Lautt 1989, Microvasc Res 37:230 (journal from memory); reference case hd-024
 */
export function forearmVascularConductance(
  meanArterialPressure: Quantity<'mm[Hg]'>,
  forearmBloodFlow: Quantity<'mL/min/dL'>,
): Quantity<'mL/min/dL/mm[Hg]'> {
  requirePositive('meanArterialPressure', meanArterialPressure);
  requirePositive('forearmBloodFlow', forearmBloodFlow);
  return quantity(forearmBloodFlow / meanArterialPressure);
}
