import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireNotNegative, requirePositive } from '../../units/require.ts';

/**
 * Oxygen delivery to a limb per volume of tissue.
 *
 * Formula  FBF · CaO₂ / 100
 * Units    FBF mL/min/dL, content mL/dL, result mL/min/dL of oxygen
 * Shape    scalars
 * Domain   FBF > 0, content ≥ 0
 * Errors   DomainError naming the argument; never NaN
 * Source   definition
 */
export function limbOxygenDelivery(
  forearmBloodFlow: Quantity<'mL/min/dL'>,
  arterialContent: Quantity<'mL/dL'>,
): Quantity<'mL/min/dL'> {
  requirePositive('forearmBloodFlow', forearmBloodFlow);
  requireNotNegative('arterialContent', arterialContent);
  return quantity((forearmBloodFlow * arterialContent) / 100);
}
