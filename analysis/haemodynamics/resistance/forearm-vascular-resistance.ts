import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive } from '../../units/require.ts';

/**
 * Forearm vascular resistance: mean arterial pressure over forearm blood flow.
 *
 * Formula  FVR = MAP / FBF
 * Units    MAP mm[Hg], FBF mL/min/dL, FVR mm[Hg].min.dL/mL; of another dimension than Wood units, never convertible to them
 * Shape    scalars
 * Domain   MAP > 0, FBF > 0, both of one condition
 * Errors   DomainError naming the argument; never NaN
 * Assumes  venous pressure neglected by convention
 * Source   convention of the field; Wilkinson & Webb 2001; reference case hd-023
 *
 *
 * @example forearmVascularResistance(quantity(90), quantity(2.5)) // 36
 */
export function forearmVascularResistance(
  meanArterialPressure: Quantity<'mm[Hg]'>,
  forearmBloodFlow: Quantity<'mL/min/dL'>,
): Quantity<'mm[Hg].min.dL/mL'> {
  requirePositive('meanArterialPressure', meanArterialPressure);
  requirePositive(
    'forearmBloodFlow',
    forearmBloodFlow,
    'Leave unusable traces out; a flow of 0 has no resistance.',
  );
  return quantity(meanArterialPressure / forearmBloodFlow);
}
