import { DomainError } from '../../units/errors.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive } from '../../units/require.ts';

/**
 * Limb volume change from the lengthening of a strain gauge, small-strain form.
 *
 * Formula  ΔV% = 200 ΔL / C
 * Units    ΔL mm, C mm, ΔV %
 * Shape    scalars
 * Domain   C > 0; |ΔL| < C
 * Errors   DomainError naming the argument; never NaN
 * Assumes  segment length constant, uniform swelling; low by 0.25 % of itself at ΔL/C = 0.005, by 1.85 % at 0.037
 * Source   Whitney 1953 principle (by citation), factor by algebra; reference case hd-004
 */
export function gaugeVolumeChange(lengthening: Quantity<'mm'>, circumference: Quantity<'mm'>): Quantity<'%'> {
  requireGauge(lengthening, circumference);
  return quantity((200 * lengthening) / circumference);
}

/** A gauge goes round the limb: its length is positive and it cannot change by more than itself. */
export function requireGauge(lengthening: number, circumference: number): void {
  requirePositive('circumference', circumference);
  if (!(Math.abs(lengthening) < circumference)) {
    throw new DomainError('lengthening', 'smaller than the circumference', lengthening);
  }
}
