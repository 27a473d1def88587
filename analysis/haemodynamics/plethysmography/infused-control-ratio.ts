import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive } from '../../units/require.ts';

/**
 * Ratio of blood flow in the infused arm to that in the control arm.
 *
 * Formula  infused / control
 * Units    both mL/min/dL, result 1
 * Shape    scalars
 * Domain   both > 0
 * Errors   DomainError naming the argument; never NaN
 * Assumes  the ratio removes systemic changes, so it hides a systemic vasoconstriction (Kamper & Chang 1999, Clin Sci 97:539)
 * Source   definition; reference case hd-008
 */
export function infusedControlRatio(
  infusedFlow: Quantity<'mL/min/dL'>,
  controlFlow: Quantity<'mL/min/dL'>,
): Quantity<'1'> {
  requirePositive('infusedFlow', infusedFlow);
  requirePositive('controlFlow', controlFlow);
  return quantity(infusedFlow / controlFlow);
}
