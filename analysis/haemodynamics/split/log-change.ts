import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive } from '../../units/require.ts';

/**
 * Change of a positive quantity on the natural log scale.
 *
 * Formula  ln(x₂/x₁)
 * Units    both in one unit, result 1
 * Shape    scalars
 * Domain   both > 0: a constant is never added to make it work
 * Errors   DomainError naming the argument; never NaN
 * Source   definition; reference case hd-091
 */
export function logChange(
  before: number,
  after: number,
  names = { before: 'before', after: 'after' },
): Quantity<'1'> {
  const remedy =
    'A logarithm needs values above 0; leave the pair out with its reason, never add a constant.';
  requirePositive(names.before, before, remedy);
  requirePositive(names.after, after, remedy);
  return quantity(Math.log(after / before));
}
