import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive, requireWithin } from '../../units/require.ts';

/**
 * Target force of a handgrip in percent of the maximal voluntary contraction.
 *
 * Formula  MVC · percent / 100
 * Units    MVC in a unit of force, percent %, result in the unit of MVC
 * Shape    scalars
 * Domain   MVC > 0, 0 ≤ percent ≤ 100
 * Errors   DomainError naming the argument; never NaN
 * Source   definition; reference case hd-117
 */
export function targetForce<Unit extends string>(
  maximalVoluntaryContraction: Quantity<Unit>,
  percent: Quantity<'%'>,
): Quantity<Unit> {
  requirePositive('maximalVoluntaryContraction', maximalVoluntaryContraction);
  requireWithin('percent', percent, 0, 100);
  return quantity((maximalVoluntaryContraction * percent) / 100);
}
