import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireWithin } from '../../units/require.ts';

/**
 * Haematocrit expected from haemoglobin by the rule of three: a check of data entry, not a measurement.
 *
 * Formula  Hct% = 3 Hb
 * Units    Hb g/dL, result %
 * Shape    scalars
 * Domain   2 ≤ Hb ≤ 25
 * Errors   DomainError naming the argument; never NaN
 * Assumes  normal red cells; within 3 points
 * Source   common practice; reference case hd-128
 */
export function haematocritFromHaemoglobin(haemoglobin: Quantity<'g/dL'>): Quantity<'%'> {
  requireWithin('haemoglobin', haemoglobin, 2, 25);
  return quantity(3 * haemoglobin);
}
