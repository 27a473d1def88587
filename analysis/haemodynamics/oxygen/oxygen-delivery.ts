import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireNotNegative, requirePositive } from '../../units/require.ts';

/**
 * Oxygen delivery: what cardiac output carries.
 *
 * Formula  DO₂ = 10 CO · CaO₂
 * Units    CO L/min, content mL/dL, result mL/min
 * Shape    scalars
 * Domain   CO > 0, content ≥ 0
 * Errors   DomainError naming the argument; never NaN
 * Source   textbook; reference case hd-122
 */
export function oxygenDelivery(
  cardiacOutput: Quantity<'L/min'>,
  arterialContent: Quantity<'mL/dL'>,
): Quantity<'mL/min'> {
  requirePositive('cardiacOutput', cardiacOutput);
  requireNotNegative('arterialContent', arterialContent);
  return quantity(10 * cardiacOutput * arterialContent);
}
