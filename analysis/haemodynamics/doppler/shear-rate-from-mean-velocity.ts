import { requireInsonationAngle } from './doppler-blood-flow.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireFinite, requirePositive } from '../../units/require.ts';

/**
 * Wall shear rate in an artery from the mean velocity.
 *
 * Formula  γ = 8 V / d
 * Units    V cm/s, d mm, γ /s
 * Shape    scalars
 * Domain   V finite (antegrade above 0), d > 0, angle ≤ 60 deg
 * Errors   DomainError naming the argument; never NaN
 * Assumes  parabolic profile; V is the mean over the cross-section
 * Source   Poiseuille; reference case hd-106
 */
export function shearRateFromMeanVelocity(
  meanVelocity: Quantity<'cm/s'>,
  diameter: Quantity<'mm'>,
  insonationAngle?: Quantity<'deg'>,
): Quantity<'/s'> {
  requireFinite('meanVelocity', meanVelocity);
  requirePositive('diameter', diameter);
  requireInsonationAngle(insonationAngle);
  return quantity((80 * meanVelocity) / diameter);
}
