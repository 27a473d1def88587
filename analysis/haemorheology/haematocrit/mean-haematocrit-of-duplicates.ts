import { median } from '../../readings/summaries.ts';
import { DomainError } from '../../units/errors.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireWithin } from '../../units/require.ts';

/**
 * Haematocrit from two tubes, or the median of three when the first two disagreed.
 *
 * Formula  (a + b)/2; with a third tube the median
 * Units    percent
 * Shape    scalars
 * Domain   each 5 to 75; the first two within 5 points of each other
 * Errors   DomainError naming the argument; never NaN
 * Source   common practice: 0.5 point apart is accepted, else a third tube; reference case hd-126
 */
export function meanHaematocritOfDuplicates(
  tube1: Quantity<'%'>,
  tube2: Quantity<'%'>,
  tube3?: Quantity<'%'>,
): Quantity<'%'> {
  requireWithin('tube1', tube1, 5, 75);
  requireWithin('tube2', tube2, 5, 75);
  if (tube3 !== undefined) {
    requireWithin('tube3', tube3, 5, 75);
    return quantity(median([tube1, tube2, tube3]));
  }
  if (Math.abs(tube1 - tube2) > 5) {
    throw new DomainError(
      'tube2',
      'within 5 points of the first tube',
      tube2,
      'Read both again, or read a third tube.',
    );
  }
  return quantity((tube1 + tube2) / 2);
}
