import { requireHaematocrit } from '../require-haematocrit.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';

/**
 * Relative viscosity of a concentrated suspension of rigid spheres. Over-predicts blood above 0.3.
 *
 * Formula  η_rel = (1 − H)^(−2.5)
 * Units    H fraction, result 1
 * Shape    scalars
 * Domain   0 ≤ H ≤ 0.6
 * Errors   DomainError naming the argument; never NaN
 * Assumes  rigid spheres
 * Source   Brinkman 1952; Roscoe 1952 (from memory); reference case hd-064
 */
export function brinkmanRelativeViscosity(haematocrit: Quantity<'1'>): Quantity<'1'> {
  requireHaematocrit(haematocrit, 0, 0.6);
  return quantity((1 - haematocrit) ** -2.5);
}
