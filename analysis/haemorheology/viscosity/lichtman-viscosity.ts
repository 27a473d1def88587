import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireWithin } from '../../units/require.ts';

/**
 * Viscosity of blood by a regression on haematocrit.
 *
 * Formula  log₁₀ η = 0.01138 Hp + 0.03699
 * Units    Hp percent, result mPa.s
 * Shape    scalars
 * Domain   0 ≤ Hp ≤ 75; drawn for 20 to 65
 * Errors   DomainError naming the argument; never NaN
 * Source   figure of Lichtman 1987 by way of an algorithm page; reference case hd-083
 */
export function lichtmanViscosity(haematocritPercent: Quantity<'%'>): Quantity<'mPa.s'> {
  requireWithin('haematocrit', haematocritPercent, 0, 75);
  return quantity(10 ** (0.01138 * haematocritPercent + 0.03699));
}
