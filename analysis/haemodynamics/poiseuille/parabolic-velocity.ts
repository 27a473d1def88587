import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive, requireWithin } from '../../units/require.ts';

/**
 * Velocity at a distance from the axis of a tube.
 *
 * Formula  v(r) = ΔP (R² − r²) / (4 η L)
 * Units    ΔP Pa, R m, r m, η Pa.s, L m, v m/s
 * Shape    scalars
 * Domain   ΔP, η, L, R > 0; 0 ≤ r ≤ R
 * Errors   DomainError naming the argument; never NaN
 * Assumes  steady laminar developed flow; the centre line moves at twice the mean velocity
 * Source   Hagen-Poiseuille; reference case hd-062
 */
export function parabolicVelocity(
  pressureDifference: Quantity<'Pa'>,
  viscosity: Quantity<'Pa.s'>,
  length: Quantity<'m'>,
  radius: Quantity<'m'>,
  distanceFromAxis: Quantity<'m'>,
): Quantity<'m/s'> {
  requirePositive('pressureDifference', pressureDifference);
  requirePositive('viscosity', viscosity);
  requirePositive('length', length);
  requirePositive('radius', radius);
  requireWithin('distanceFromAxis', distanceFromAxis, 0, radius);
  return quantity((pressureDifference * (radius ** 2 - distanceFromAxis ** 2)) / (4 * viscosity * length));
}
