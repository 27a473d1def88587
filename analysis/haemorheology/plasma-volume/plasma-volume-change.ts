import { bloodVolumeAfter } from './blood-volume-after.ts';
import type { VolumeEvents } from './red-cell-mass.ts';
import { requireHaematocrit } from '../require-haematocrit.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive } from '../../units/require.ts';

/**
 * Change of plasma volume in percent of the volume before.
 *
 * Formula  100 ((Hb_B/Hb_A)(1 − Hct_A)/(1 − Hct_B) − 1)
 * Units    Hb g/dL, Hct fraction, result %
 * Shape    scalars
 * Domain   Hb 2 to 25; 0 < Hct < 1; no blood loss or transfusion between the samples
 * Errors   DomainError naming the argument; never NaN
 * Assumes  constant red-cell mass; with Hb CV 1 % and Hct SD 0.5 point the result is good to about ± 1.9 points
 * Source   Dill & Costill 1974, J Appl Physiol 37:247 (−12.2 % in the abstract); reference cases hd-134, hd-135
 */
export function plasmaVolumeChange(
  haemoglobinBefore: Quantity<'g/dL'>,
  haemoglobinAfter: Quantity<'g/dL'>,
  haematocritBefore: Quantity<'1'>,
  haematocritAfter: Quantity<'1'>,
  events: VolumeEvents = {},
): Quantity<'%'> {
  requirePositive('haematocritBefore', haematocritBefore);
  requireHaematocrit(haematocritBefore, 0, 1, 'haematocritBefore');
  requirePositive('haematocritAfter', haematocritAfter);
  requireHaematocrit(haematocritAfter, 0, 1, 'haematocritAfter');
  const blood = bloodVolumeAfter(haemoglobinBefore, haemoglobinAfter, events);
  return quantity((blood * (1 - haematocritAfter)) / (1 - haematocritBefore) - 100);
}
