import { requireHaematocrit } from '../require-haematocrit.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive, requireWithin } from '../../units/require.ts';

/**
 * Whole-body haematocrit from the venous one: small vessels hold fewer cells.
 *
 * Formula  H_body = F H_venous
 * Units    both fractions
 * Shape    scalars
 * Domain   0 < H < 1; 0.8 ≤ F ≤ 1 (about 0.91)
 * Errors   DomainError naming the argument; never NaN
 * Source   F-cell ratio of an algorithm page; reference case hd-131
 */
export function wholeBodyHaematocrit(
  venousHaematocrit: Quantity<'1'>,
  cellRatio: Quantity<'1'>,
): Quantity<'1'> {
  requirePositive('venousHaematocrit', venousHaematocrit);
  requireHaematocrit(venousHaematocrit, 0, 1, 'venousHaematocrit');
  requireWithin('cellRatio', cellRatio, 0.8, 1);
  return quantity(venousHaematocrit * cellRatio);
}
