import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireNotNegative } from '../../units/require.ts';

/**
 * Standard deviation of the log-change of resistance from the four relative spreads.
 *
 * Formula  √(CV_P1² + CV_Q1² + CV_P2² + CV_Q2²)
 * Units    1
 * Shape    scalars
 * Domain   each ≥ 0
 * Errors   DomainError naming the argument; never NaN
 * Assumes  first order, independent errors
 * Source   propagation of errors; reference case hd-101
 */
export function logChangeDeviation(
  pressureVariation1: Quantity<'1'>,
  flowVariation1: Quantity<'1'>,
  pressureVariation2: Quantity<'1'>,
  flowVariation2: Quantity<'1'>,
): Quantity<'1'> {
  requireNotNegative('pressureVariation1', pressureVariation1);
  requireNotNegative('flowVariation1', flowVariation1);
  requireNotNegative('pressureVariation2', pressureVariation2);
  requireNotNegative('flowVariation2', flowVariation2);
  return quantity(Math.hypot(pressureVariation1, flowVariation1, pressureVariation2, flowVariation2));
}
