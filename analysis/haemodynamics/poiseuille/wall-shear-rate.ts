import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireFinite, requirePositive } from '../../units/require.ts';

/**
 * Shear rate at the wall of a tube from the mean velocity of a parabolic profile.
 *
 * Formula  γ = 8 V / d
 * Units    V cm/s, d cm, γ /s
 * Shape    scalars
 * Domain   V finite (its sign is that of the flow), d > 0
 * Errors   DomainError naming the argument; never NaN
 * Assumes  V is the mean over cross-section and time; with the centre-line velocity the factor is 4
 * Source   Poiseuille; reference cases hd-056 to hd-058
 */
export function wallShearRate(meanVelocity: Quantity<'cm/s'>, diameter: Quantity<'cm'>): Quantity<'/s'> {
  requireFinite('meanVelocity', meanVelocity);
  requirePositive('diameter', diameter);
  return quantity((8 * meanVelocity) / diameter);
}
