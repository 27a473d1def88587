import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive } from '../../units/require.ts';

/**
 * Resistance of a straight tube to laminar flow.
 *
 * Formula  R = 8 η L / (π r⁴)
 * Units    η Pa.s, L m, r m, R Pa.s/m3
 * Shape    scalars
 * Domain   all > 0
 * Errors   DomainError naming the argument; never NaN
 * Assumes  steady, laminar, developed flow of a Newtonian fluid in a rigid tube
 * Source   Hagen-Poiseuille; Sutera & Skalak 1993, Annu Rev Fluid Mech 25:1-19; reference case hd-042
 */
export function poiseuilleResistance(
  viscosity: Quantity<'Pa.s'>,
  length: Quantity<'m'>,
  radius: Quantity<'m'>,
): Quantity<'Pa.s/m3'> {
  requirePositive('viscosity', viscosity);
  requirePositive('length', length);
  requirePositive('radius', radius);
  return quantity((8 * viscosity * length) / (Math.PI * radius ** 4));
}
