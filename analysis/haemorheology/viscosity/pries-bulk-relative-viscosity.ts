import { requireHaematocrit } from '../require-haematocrit.ts';
import { priesHaematocritFactor } from './pries-shape.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';

/**
 * Relative viscosity of blood in wide vessels: the limit of the Pries laws for an infinite diameter.
 *
 * Formula  η_rel = 1 + 2.2 ((1−H)^(−0.8) − 1)/(0.55^(−0.8) − 1)
 * Units    H fraction, result 1
 * Shape    scalars
 * Domain   0 ≤ H ≤ 0.9
 * Errors   DomainError naming the argument; never NaN
 * Assumes  high shear rate (50 /s and more)
 * Source   Pries et al. 1992, limit by algebra; 3.2 at 0.45 is the paper's constant; reference cases hd-080, hd-081
 */
export function priesBulkRelativeViscosity(haematocrit: Quantity<'1'>): Quantity<'1'> {
  requireHaematocrit(haematocrit, 0, 0.9);
  return quantity(1 + 2.2 * priesHaematocritFactor(haematocrit, -0.8));
}
