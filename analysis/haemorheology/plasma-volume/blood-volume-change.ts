import { bloodVolumeAfter } from './blood-volume-after.ts';
import type { VolumeEvents } from './red-cell-mass.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';

/**
 * Change of blood volume in percent of the volume before.
 *
 * Formula  BV_A − 100
 * Units    Hb g/dL, result %
 * Shape    scalars
 * Domain   both 2 to 25; no blood loss or transfusion between the samples
 * Errors   DomainError naming the argument; never NaN
 * Assumes  constant red-cell mass
 * Source   Dill & Costill 1974, J Appl Physiol 37:247
 */
export function bloodVolumeChange(
  haemoglobinBefore: Quantity<'g/dL'>,
  haemoglobinAfter: Quantity<'g/dL'>,
  events: VolumeEvents = {},
): Quantity<'%'> {
  return quantity(bloodVolumeAfter(haemoglobinBefore, haemoglobinAfter, events) - 100);
}
