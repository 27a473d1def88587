import { poiseuilleResistance } from './poiseuille-resistance.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive } from '../../units/require.ts';

/**
 * Flow through a straight tube at a given pressure drop.
 *
 * Formula  Q = ΔP π r⁴ / (8 η L)
 * Units    ΔP Pa, η Pa.s, L m, r m, Q m3/s
 * Shape    scalars
 * Domain   all > 0
 * Errors   DomainError naming the argument; never NaN
 * Assumes  steady, laminar, developed flow of a Newtonian fluid in a rigid tube
 * Source   Hagen-Poiseuille; reference case hd-044
 */
export function poiseuilleFlow(
  pressureDifference: Quantity<'Pa'>,
  viscosity: Quantity<'Pa.s'>,
  length: Quantity<'m'>,
  radius: Quantity<'m'>,
): Quantity<'m3/s'> {
  requirePositive('pressureDifference', pressureDifference);
  return quantity(pressureDifference / poiseuilleResistance(viscosity, length, radius));
}
