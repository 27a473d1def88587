import { requireConstantRedCellMass } from './red-cell-mass.ts';
import type { VolumeEvents } from './red-cell-mass.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireWithin } from '../../units/require.ts';

/**
 * Blood volume after, on a scale where it was 100 mL before.
 *
 * Formula  BV_A = 100 Hb_B / Hb_A
 * Units    Hb g/dL, result mL per 100 mL before
 * Shape    scalars
 * Domain   both 2 to 25; no blood loss or transfusion between the samples
 * Errors   DomainError naming the argument; never NaN
 * Assumes  constant red-cell mass; same posture for 20 min
 * Source   Dill & Costill 1974, J Appl Physiol 37:247; reference case hd-132
 */
export function bloodVolumeAfter(
  haemoglobinBefore: Quantity<'g/dL'>,
  haemoglobinAfter: Quantity<'g/dL'>,
  events: VolumeEvents = {},
): Quantity<'mL'> {
  requireWithin('haemoglobinBefore', haemoglobinBefore, 2, 25);
  requireWithin('haemoglobinAfter', haemoglobinAfter, 2, 25);
  requireConstantRedCellMass(events);
  return quantity((100 * haemoglobinBefore) / haemoglobinAfter);
}
