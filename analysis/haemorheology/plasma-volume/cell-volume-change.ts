import { cellVolumeAfter } from './cell-volume-after.ts';
import type { VolumeEvents } from './red-cell-mass.ts';
import { requireHaematocrit } from '../require-haematocrit.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive } from '../../units/require.ts';

/**
 * Change of red-cell volume in percent of the volume before: near 0 unless the cells swelled or shrank.
 *
 * Formula  100 (CV_A − CV_B) / CV_B, CV_B = 100 Hct_B
 * Units    Hb g/dL, Hct fraction, result %
 * Shape    scalars
 * Domain   Hb 2 to 25; 0 < Hct < 1; no blood loss or transfusion between the samples
 * Errors   DomainError naming the argument; never NaN
 * Assumes  constant number of red cells
 * Source   Dill & Costill 1974, J Appl Physiol 37:247
 */
export function cellVolumeChange(
  haemoglobinBefore: Quantity<'g/dL'>,
  haemoglobinAfter: Quantity<'g/dL'>,
  haematocritBefore: Quantity<'1'>,
  haematocritAfter: Quantity<'1'>,
  events: VolumeEvents = {},
): Quantity<'%'> {
  requirePositive('haematocritBefore', haematocritBefore);
  requireHaematocrit(haematocritBefore, 0, 1, 'haematocritBefore');
  const after = cellVolumeAfter(haemoglobinBefore, haemoglobinAfter, haematocritAfter, events);
  return quantity(after / haematocritBefore - 100);
}
