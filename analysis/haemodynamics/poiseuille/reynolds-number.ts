import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive } from '../../units/require.ts';

/**
 * Reynolds number: inertia against friction. Above 2000 flow may turn turbulent, above 4000 Poiseuille's law is refused.
 *
 * Formula  Re = ρ V d / η
 * Units    ρ kg/m3, V m/s, d m, η Pa.s, result 1
 * Shape    scalars
 * Domain   all > 0
 * Errors   DomainError naming the argument; never NaN
 * Source   textbook; reference case hd-051
 */
export function reynoldsNumber(
  density: Quantity<'kg/m3'>,
  meanVelocity: Quantity<'m/s'>,
  diameter: Quantity<'m'>,
  viscosity: Quantity<'Pa.s'>,
): Quantity<'1'> {
  requirePositive('density', density);
  requirePositive('meanVelocity', meanVelocity);
  requirePositive('diameter', diameter);
  requirePositive('viscosity', viscosity);
  return quantity((density * meanVelocity * diameter) / viscosity);
}
