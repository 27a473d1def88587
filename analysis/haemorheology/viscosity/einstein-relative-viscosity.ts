import { DomainError } from '../../units/errors.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';

/**
 * Relative viscosity of a very dilute suspension of rigid spheres. For teaching: no blood is that dilute.
 *
 * Formula  η_rel = 1 + 2.5 H
 * Units    H fraction, result 1
 * Shape    scalars
 * Domain   0 ≤ H < 0.05
 * Errors   DomainError naming the argument; never NaN
 * Assumes  rigid spheres that do not see each other
 * Source   Einstein 1906, corrected 1911 (from memory); reference case hd-063
 */
export function einsteinRelativeViscosity(haematocrit: Quantity<'1'>): Quantity<'1'> {
  if (!(haematocrit >= 0 && haematocrit < 0.05)) {
    throw new DomainError(
      'haematocrit',
      'below 0.05: the law is for dilute rigid spheres, not for blood',
      haematocrit,
      'Use one of the Pries or Quemada laws for blood.',
    );
  }
  return quantity(1 + 2.5 * haematocrit);
}
