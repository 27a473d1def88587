import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive } from '../../units/require.ts';

/**
 * Shear stress at the wall from the pressure drop; holds for any fluid.
 *
 * Formula  τ = ΔP r / (2 L)
 * Units    ΔP Pa, r m, L m, τ Pa
 * Shape    scalars
 * Domain   ΔP > 0, r > 0, L > 0
 * Errors   DomainError naming the argument; never NaN
 * Assumes  steady developed flow in a straight tube
 * Source   balance of forces; reference case hd-061
 */
export function wallShearStressFromPressureDrop(
  pressureDifference: Quantity<'Pa'>,
  radius: Quantity<'m'>,
  length: Quantity<'m'>,
): Quantity<'Pa'> {
  requirePositive('pressureDifference', pressureDifference);
  requirePositive('radius', radius);
  requirePositive('length', length);
  return quantity((pressureDifference * radius) / (2 * length));
}
