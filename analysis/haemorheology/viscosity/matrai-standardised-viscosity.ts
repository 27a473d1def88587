import { requireHaematocrit } from '../require-haematocrit.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive } from '../../units/require.ts';

/**
 * A measured blood viscosity brought to a standard haematocrit.
 *
 * Formula  η_s = η_p (η/η_p)^(H_s/H)
 * Units    viscosities mPa.s, haematocrits fraction
 * Shape    scalars
 * Domain   η > 0, η_p > 0, 0 < H < 1, 0 < H_s < 1; used for 0.2 to 0.6
 * Errors   DomainError naming the argument; never NaN
 * Assumes  the logarithm of viscosity is linear in haematocrit at one shear rate
 * Source   Matrai et al. 1987 (from memory); reference case hd-087
 */
export function matraiStandardisedViscosity(
  viscosity: Quantity<'mPa.s'>,
  plasmaViscosity: Quantity<'mPa.s'>,
  haematocrit: Quantity<'1'>,
  standardHaematocrit: Quantity<'1'>,
): Quantity<'mPa.s'> {
  requirePositive('viscosity', viscosity);
  requirePositive('plasmaViscosity', plasmaViscosity);
  requirePositive('haematocrit', haematocrit);
  requireHaematocrit(haematocrit);
  requirePositive('standardHaematocrit', standardHaematocrit);
  requireHaematocrit(standardHaematocrit, 0, 1, 'standardHaematocrit');
  return quantity(plasmaViscosity * (viscosity / plasmaViscosity) ** (standardHaematocrit / haematocrit));
}
