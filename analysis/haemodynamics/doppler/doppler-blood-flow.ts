import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive, requireWithin } from '../../units/require.ts';

/**
 * Volume flow in an artery from its diameter and the time-mean velocity over its cross-section.
 *
 * Formula  Q = π (d/2)² V · 60, d in cm
 * Units    d mm, V cm/s, Q mL/min
 * Shape    scalars
 * Domain   d > 0, V > 0, angle ≤ 60 deg
 * Errors   DomainError naming the argument; never NaN
 * Assumes  circular lumen; a sample volume narrower than the lumen overestimates the mean velocity
 * Source   continuity; brachial 4.40 mm and 9.15 cm/s, 85 mL/min (product of means 83.5); reference case hd-105
 */
export function dopplerBloodFlow(
  diameter: Quantity<'mm'>,
  meanVelocity: Quantity<'cm/s'>,
  insonationAngle?: Quantity<'deg'>,
): Quantity<'mL/min'> {
  requirePositive('diameter', diameter);
  requirePositive(
    'meanVelocity',
    meanVelocity,
    'Give the net time-mean velocity; a flow at or below 0 supplies no tissue.',
  );
  requireInsonationAngle(insonationAngle);
  return quantity(Math.PI * (diameter / 20) ** 2 * meanVelocity * 60);
}

/** Above 60 degrees a small error of the angle is a large one of the velocity. */
export function requireInsonationAngle(angle: Quantity<'deg'> | undefined): void {
  if (angle !== undefined) {
    requireWithin(
      'insonationAngle',
      angle,
      0,
      60,
      'Velocities taken above 60 degrees are not used; record them again.',
    );
  }
}
