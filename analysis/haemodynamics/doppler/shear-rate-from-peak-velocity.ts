import { requireInsonationAngle } from './doppler-blood-flow.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireFinite, requirePositive } from '../../units/require.ts';

/**
 * Wall shear rate in an artery from the centre-line (maximum, envelope) velocity.
 *
 * Formula  γ = 4 V / d
 * Units    V cm/s, d mm, γ /s
 * Shape    scalars
 * Domain   V finite, d > 0, angle ≤ 60 deg
 * Errors   DomainError naming the argument; never NaN
 * Assumes  parabolic profile, whose centre line moves at twice the mean. Used with a mean velocity it gives half the wall value
 * Source   Poiseuille; reference case hd-107
 */
export function shearRateFromPeakVelocity(
  peakVelocity: Quantity<'cm/s'>,
  diameter: Quantity<'mm'>,
  insonationAngle?: Quantity<'deg'>,
): Quantity<'/s'> {
  requireFinite('peakVelocity', peakVelocity);
  requirePositive('diameter', diameter);
  requireInsonationAngle(insonationAngle);
  return quantity((40 * peakVelocity) / diameter);
}
