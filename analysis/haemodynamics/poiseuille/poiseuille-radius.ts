import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive } from '../../units/require.ts';

/**
 * Radius of the single tube that would have a given resistance.
 *
 * Formula  r = (8 η L / (π R))^(1/4)
 * Units    R Pa.s/m3, η Pa.s, L m, r m
 * Shape    scalars
 * Domain   all > 0
 * Errors   DomainError naming the argument; never NaN
 * Assumes  an equivalent tube; a bed's length, number, branching and radius are bundled in it
 * Source   Hagen-Poiseuille solved for r; reference case hd-045
 */
export function poiseuilleRadius(
  resistance: Quantity<'Pa.s/m3'>,
  viscosity: Quantity<'Pa.s'>,
  length: Quantity<'m'>,
): Quantity<'m'> {
  requirePositive('resistance', resistance);
  requirePositive('viscosity', viscosity);
  requirePositive('length', length);
  return quantity(((8 * viscosity * length) / (Math.PI * resistance)) ** 0.25);
}
