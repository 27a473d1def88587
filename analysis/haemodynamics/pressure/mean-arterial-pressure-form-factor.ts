import { pulsePressure } from './pulse-pressure.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireWithin } from '../../units/require.ts';

/**
 * Mean arterial pressure from a form factor: the fraction of pulse pressure to add to diastolic.
 *
 * Formula  MAP = DBP + k · PP
 * Units    pressures mm[Hg], k 1
 * Shape    scalars
 * Domain   SBP > DBP; 0.2 ≤ k ≤ 0.6 (brachial k of 1526 people: 0.23 to 0.58, J Hypertens 2020)
 * Errors   DomainError naming the argument; never NaN
 * Assumes  one k for everybody; in people it averages 0.42 ± 0.055. Never mix definitions inside a subject
 * Source   k 0.412 Meaney 2000 (from memory), 0.40 Bos 2007 J Hypertens 25:751; compared by Papaioannou 2016 Hypertens Res;
 *          reference case hd-011
 */
export function meanArterialPressureFormFactor(
  systolicPressure: Quantity<'mm[Hg]'>,
  diastolicPressure: Quantity<'mm[Hg]'>,
  formFactor: Quantity<'1'>,
): Quantity<'mm[Hg]'> {
  requireWithin('formFactor', formFactor, 0.2, 0.6);
  return quantity(diastolicPressure + formFactor * pulsePressure(systolicPressure, diastolicPressure));
}
