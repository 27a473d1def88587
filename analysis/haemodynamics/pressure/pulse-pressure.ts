import { DomainError } from '../../units/errors.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireFinite, requireNotNegative } from '../../units/require.ts';

/**
 * Pulse pressure: the swing of arterial pressure in one beat.
 *
 * Formula  PP = SBP − DBP
 * Units    mm[Hg]
 * Shape    scalars
 * Domain   SBP > DBP, DBP ≥ 0
 * Errors   DomainError naming the argument; never NaN
 * Source   definition; reference case hd-017
 */
export function pulsePressure(
  systolicPressure: Quantity<'mm[Hg]'>,
  diastolicPressure: Quantity<'mm[Hg]'>,
): Quantity<'mm[Hg]'> {
  requireNotNegative('diastolicPressure', diastolicPressure);
  requireFinite('systolicPressure', systolicPressure);
  if (systolicPressure <= diastolicPressure) {
    throw new DomainError(
      'systolicPressure',
      `above the diastolic pressure (${diastolicPressure})`,
      systolicPressure,
      'Check whether the two were exchanged, and that both come from the same reading.',
    );
  }
  return quantity(systolicPressure - diastolicPressure);
}
