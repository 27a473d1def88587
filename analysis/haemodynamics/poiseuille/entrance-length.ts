import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive, requireWithin } from '../../units/require.ts';

/**
 * Length that laminar flow needs until its profile is developed.
 *
 * Formula  Le = 0.06 Re d
 * Units    Re 1, d m, Le m
 * Shape    scalars
 * Domain   Re > 0 and at most 4000 (laminar), d > 0
 * Errors   DomainError naming the argument; never NaN
 * Source   common engineering estimate; reference case hd-055
 */
export function entranceLength(reynolds: Quantity<'1'>, diameter: Quantity<'m'>): Quantity<'m'> {
  requirePositive('reynolds', reynolds);
  requirePositive('diameter', diameter);
  requireWithin('reynolds', reynolds, 0, 4000, 'The rule holds for laminar flow only.');
  return quantity(0.06 * reynolds * diameter);
}
