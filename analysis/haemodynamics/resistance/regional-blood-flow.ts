import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive, requireWithin } from '../../units/require.ts';

/**
 * Blood flow to a region from an assumed fraction of cardiac output.
 *
 * Formula  Q_region = fraction · CO
 * Units    CO L/min, fraction 1, result L/min
 * Shape    scalars
 * Domain   CO > 0, 0 < fraction ≤ 1
 * Errors   DomainError naming the argument; never NaN
 * Assumes  the fraction is an assumption, not a measurement; it moves with temperature, meal, posture and exercise
 * Source   common practice (kidneys about 0.20, skin 0.05 to 0.15, gut 0.18 to 0.27); reference case hd-041
 */
export function regionalBloodFlow(
  cardiacOutput: Quantity<'L/min'>,
  flowFraction: Quantity<'1'>,
): Quantity<'L/min'> {
  requirePositive('cardiacOutput', cardiacOutput);
  requirePositive('flowFraction', flowFraction);
  requireWithin('flowFraction', flowFraction, 0, 1);
  return quantity(cardiacOutput * flowFraction);
}
