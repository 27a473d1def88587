import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive } from '../../units/require.ts';

/**
 * Percentage change of the infused-to-control ratio from condition 1 to condition 2. For display: analyse log ratios.
 *
 * Formula  100 ((I₂/C₂)/(I₁/C₁) − 1)
 * Units    flows mL/min/dL, result %
 * Shape    scalars
 * Domain   all flows > 0
 * Errors   DomainError naming the argument; never NaN
 * Source   definition; reference case hd-009
 */
export function infusedControlRatioChange(
  infusedFlow1: Quantity<'mL/min/dL'>,
  controlFlow1: Quantity<'mL/min/dL'>,
  infusedFlow2: Quantity<'mL/min/dL'>,
  controlFlow2: Quantity<'mL/min/dL'>,
): Quantity<'%'> {
  requirePositive('infusedFlow1', infusedFlow1);
  requirePositive('controlFlow1', controlFlow1);
  requirePositive('infusedFlow2', infusedFlow2);
  requirePositive('controlFlow2', controlFlow2);
  return quantity(100 * (infusedFlow2 / controlFlow2 / (infusedFlow1 / controlFlow1) - 1));
}
