import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive } from '../../units/require.ts';

/**
 * Pressure drop along a straight tube at a given mean velocity.
 *
 * Formula  ΔP = 8 η L V / r²
 * Units    η Pa.s, L m, V m/s, r m, ΔP Pa
 * Shape    scalars
 * Domain   all > 0
 * Errors   DomainError naming the argument; never NaN
 * Assumes  V is the mean over the cross-section, half of the centre-line velocity
 * Source   Hagen-Poiseuille
 */
export function poiseuillePressureDropFromVelocity(
  viscosity: Quantity<'Pa.s'>,
  length: Quantity<'m'>,
  meanVelocity: Quantity<'m/s'>,
  radius: Quantity<'m'>,
): Quantity<'Pa'> {
  requirePositive('viscosity', viscosity);
  requirePositive('length', length);
  requirePositive('meanVelocity', meanVelocity);
  requirePositive('radius', radius);
  return quantity((8 * viscosity * length * meanVelocity) / radius ** 2);
}
