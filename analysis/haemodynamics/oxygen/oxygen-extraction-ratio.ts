import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive, requireWithin } from '../../units/require.ts';

/**
 * Fraction of the delivered oxygen that is taken up.
 *
 * Formula  ER = (CaO₂ − CvO₂) / CaO₂
 * Units    contents mL/dL, result 1
 * Shape    scalars
 * Domain   CaO₂ > 0; 0 ≤ CvO₂ ≤ CaO₂
 * Errors   DomainError naming the argument; never NaN
 * Source   textbook
 */
export function oxygenExtractionRatio(
  arterialContent: Quantity<'mL/dL'>,
  venousContent: Quantity<'mL/dL'>,
): Quantity<'1'> {
  requirePositive('arterialContent', arterialContent);
  requireWithin(
    'venousContent',
    venousContent,
    0,
    arterialContent,
    'Check whether the two samples were exchanged.',
  );
  return quantity((arterialContent - venousContent) / arterialContent);
}
