import { poiseuilleResistance } from './poiseuille-resistance.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive } from '../../units/require.ts';

/**
 * Pressure drop along a straight tube at a given flow.
 *
 * Formula  ΔP = Q · 8 η L / (π r⁴)
 * Units    Q m3/s, η Pa.s, L m, r m, ΔP Pa
 * Shape    scalars
 * Domain   all > 0
 * Errors   DomainError naming the argument; never NaN
 * Assumes  steady, laminar, developed flow of a Newtonian fluid in a rigid tube
 * Source   Hagen-Poiseuille; reference case hd-043
 */
export function poiseuillePressureDrop(
  flow: Quantity<'m3/s'>,
  viscosity: Quantity<'Pa.s'>,
  length: Quantity<'m'>,
  radius: Quantity<'m'>,
): Quantity<'Pa'> {
  requirePositive('flow', flow);
  return quantity(flow * poiseuilleResistance(viscosity, length, radius));
}
