import { bloodVolumeAfter } from './blood-volume-after.ts';
import type { VolumeEvents } from './red-cell-mass.ts';
import { requireHaematocrit } from '../require-haematocrit.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive } from '../../units/require.ts';

/**
 * Volume of the red cells after, on a scale where blood volume was 100 mL before.
 *
 * Formula  CV_A = BV_A · Hct_A
 * Units    Hb g/dL, Hct fraction, result mL per 100 mL of blood before
 * Shape    scalars
 * Domain   Hb 2 to 25; 0 < Hct < 1; no blood loss or transfusion between the samples
 * Errors   DomainError naming the argument; never NaN
 * Assumes  constant red-cell mass
 * Source   Dill & Costill 1974, J Appl Physiol 37:247; reference case hd-133
 */
export function cellVolumeAfter(
  haemoglobinBefore: Quantity<'g/dL'>,
  haemoglobinAfter: Quantity<'g/dL'>,
  haematocritAfter: Quantity<'1'>,
  events: VolumeEvents = {},
): Quantity<'mL'> {
  requirePositive('haematocritAfter', haematocritAfter);
  requireHaematocrit(haematocritAfter, 0, 1, 'haematocritAfter');
  return quantity(bloodVolumeAfter(haemoglobinBefore, haemoglobinAfter, events) * haematocritAfter);
}
