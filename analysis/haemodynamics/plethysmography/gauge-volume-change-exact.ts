import { requireGauge } from './gauge-volume-change.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';

/**
 * Limb volume change from the lengthening of a strain gauge, without the small-strain approximation.
 *
 * Formula  ΔV% = 100 ((1 + ΔL/C)² − 1)
 * Units    ΔL mm, C mm, ΔV %
 * Shape    scalars
 * Domain   C > 0; |ΔL| < C
 * Errors   DomainError naming the argument; never NaN
 * Assumes  segment length constant, uniform swelling
 * Source   geometry of a cylinder; reference case hd-005
 */
export function gaugeVolumeChangeExact(
  lengthening: Quantity<'mm'>,
  circumference: Quantity<'mm'>,
): Quantity<'%'> {
  requireGauge(lengthening, circumference);
  const strain = lengthening / circumference;
  return quantity(100 * strain * (2 + strain));
}
