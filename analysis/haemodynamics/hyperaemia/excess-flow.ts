import { trapezoidArea } from '../trapezoid-area.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireEachPositive, requirePositive } from '../../units/require.ts';

/**
 * Blood flow above baseline after an occlusion: the repayment.
 *
 * Formula  ∫ (FBF − baseline) dt, trapezoidal over the times given
 * Units    t min, FBF mL/min/dL, result mL/dL
 * Shape    two series of one length, at least 2 points
 * Domain   times strictly rising; flows and baseline > 0
 * Errors   DomainError naming the argument; never NaN
 * Assumes  the series ends when flow is back within 10 % of baseline or at the protocol's time; nothing is extrapolated
 * Source   definition; reference case hd-114
 */
export function excessFlow(
  times: readonly Quantity<'min'>[],
  flows: readonly Quantity<'mL/min/dL'>[],
  baselineFlow: Quantity<'mL/min/dL'>,
): Quantity<'mL/dL'> {
  requirePositive('baselineFlow', baselineFlow);
  requireEachPositive('flows', flows);
  return quantity(
    trapezoidArea(
      times,
      flows.map((flow) => flow - baselineFlow),
      'flows',
    ),
  );
}
