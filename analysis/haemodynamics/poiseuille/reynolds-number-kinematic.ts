import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive } from '../../units/require.ts';

/**
 * Reynolds number from the kinematic viscosity.
 *
 * Formula  Re = V d / ν
 * Units    V cm/s, d cm, ν cm2/s, result 1
 * Shape    scalars
 * Domain   all > 0
 * Errors   DomainError naming the argument; never NaN
 * Source   textbook; reference case hd-052
 */
export function reynoldsNumberKinematic(
  meanVelocity: Quantity<'cm/s'>,
  diameter: Quantity<'cm'>,
  kinematicViscosity: Quantity<'cm2/s'>,
): Quantity<'1'> {
  requirePositive('meanVelocity', meanVelocity);
  requirePositive('diameter', diameter);
  requirePositive('kinematicViscosity', kinematicViscosity);
  return quantity((meanVelocity * diameter) / kinematicViscosity);
}
