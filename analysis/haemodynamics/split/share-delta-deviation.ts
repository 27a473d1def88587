import { sharesNotMeaningful } from './shares.ts';
import { DomainError } from '../../units/errors.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireFinite, requireNotNegative } from '../../units/require.ts';

/**
 * Quick standard deviation of the rheological share by the delta method; show Fieller's interval instead.
 *
 * Formula  √(var A + s² var B)/|B|, s = A/B
 * Units    1
 * Shape    scalars
 * Domain   B ≠ 0; SDs ≥ 0
 * Errors   DomainError naming the argument; never NaN
 * Assumes  A and B independent; poor where B is not clearly different from 0
 * Source   delta method; reference case hd-102
 */
export function shareDeltaDeviation(
  rheologicalLogChange: Quantity<'1'>,
  totalLogChange: Quantity<'1'>,
  rheologicalDeviation: Quantity<'1'>,
  totalDeviation: Quantity<'1'>,
): Quantity<'1'> {
  requireFinite('rheologicalLogChange', rheologicalLogChange);
  requireFinite('totalLogChange', totalLogChange);
  if (totalLogChange === 0) throw new DomainError('totalLogChange', 'other than 0', 0, sharesNotMeaningful);
  requireNotNegative('rheologicalDeviation', rheologicalDeviation);
  requireNotNegative('totalDeviation', totalDeviation);
  const share = rheologicalLogChange / totalLogChange;
  return quantity(Math.hypot(rheologicalDeviation, share * totalDeviation) / Math.abs(totalLogChange));
}
