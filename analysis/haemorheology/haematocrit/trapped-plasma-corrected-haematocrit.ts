import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive, requireWithin } from '../../units/require.ts';

/**
 * Spun haematocrit less the plasma trapped between the cells. Never applied silently.
 *
 * Formula  Hct (1 − f)
 * Units    Hct percent, f 1
 * Shape    scalars
 * Domain   0 < Hct ≤ 75; 0 ≤ f ≤ 0.3 (0.01 to 0.03 normally, 0.05 to 0.06 hypochromic, above 0.2 in sickle samples)
 * Errors   DomainError naming the argument; never NaN
 * Source   England et al. 1972; reference case hd-127
 */
export function trappedPlasmaCorrectedHaematocrit(
  haematocritPercent: Quantity<'%'>,
  trappedFraction: Quantity<'1'>,
): Quantity<'%'> {
  requirePositive('haematocrit', haematocritPercent);
  requireWithin('haematocrit', haematocritPercent, 0, 75);
  requireWithin('trappedFraction', trappedFraction, 0, 0.3);
  return quantity(haematocritPercent * (1 - trappedFraction));
}
