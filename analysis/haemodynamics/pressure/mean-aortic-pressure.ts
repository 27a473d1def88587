import { pulsePressure } from './pulse-pressure.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';

/**
 * Mean aortic root pressure: one third of pulse pressure and 5 mmHg more.
 *
 * Formula  MAP = DBP + PP/3 + 5
 * Units    mm[Hg]
 * Shape    scalars
 * Domain   SBP > DBP
 * Errors   DomainError naming the argument; never NaN
 * Assumes  aortic root pressures only, never cuff pressures
 * Source   Chemla et al. 2002, Clin Sci 103:7-13; reference case hd-013
 */
export function meanAorticPressure(
  systolicPressure: Quantity<'mm[Hg]'>,
  diastolicPressure: Quantity<'mm[Hg]'>,
): Quantity<'mm[Hg]'> {
  return quantity(diastolicPressure + pulsePressure(systolicPressure, diastolicPressure) / 3 + 5);
}
