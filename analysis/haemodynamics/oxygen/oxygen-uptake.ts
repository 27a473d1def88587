import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireNotNegative, requirePositive, requireWithin } from '../../units/require.ts';

/**
 * Oxygen uptake by the Fick principle.
 *
 * Formula  VO₂ = 10 CO (CaO₂ − CvO₂)
 * Units    CO L/min, contents mL/dL, result mL/min
 * Shape    scalars
 * Domain   CO > 0; 0 ≤ CvO₂ ≤ CaO₂
 * Errors   DomainError naming the argument; never NaN
 * Source   Fick principle; reference case hd-123
 */
export function oxygenUptake(
  cardiacOutput: Quantity<'L/min'>,
  arterialContent: Quantity<'mL/dL'>,
  venousContent: Quantity<'mL/dL'>,
): Quantity<'mL/min'> {
  requirePositive('cardiacOutput', cardiacOutput);
  requireNotNegative('arterialContent', arterialContent);
  requireWithin(
    'venousContent',
    venousContent,
    0,
    arterialContent,
    'Check whether the two samples were exchanged.',
  );
  return quantity(10 * cardiacOutput * (arterialContent - venousContent));
}
