import { cokeletParameters } from './quemada-cokelet-viscosity.ts';
import { quemadaViscosity } from './quemada-viscosity.ts';
import type { Quantity } from '../../units/quantity.ts';

/**
 * Viscosity of blood by Quemada's law with the coefficients of Das, monotone in haematocrit at all shear rates tested.
 *
 * Formula  k₀ = 0.275363 + 2/(0.100158 + H); k∞ and γc as in Cokelet's form
 * Units    H fraction, γ /s, η_p mPa.s, result mPa.s
 * Shape    scalars
 * Domain   0 ≤ H < 1, fitted for 0.1 to 0.65; γ ≥ 0; η_p > 0
 * Errors   DomainError naming the argument; never NaN
 * Source   coefficients tabulated by Hund et al. 2017, Fluids 2:10, table 2 (read in a public code); reference case hd-069
 */
export function quemadaDasViscosity(
  haematocrit: Quantity<'1'>,
  shearRate: Quantity<'/s'>,
  plasmaViscosity: Quantity<'mPa.s'>,
): Quantity<'mPa.s'> {
  return quemadaViscosity(haematocrit, shearRate, plasmaViscosity, {
    ...cokeletParameters(haematocrit),
    k0: 0.275363 + 2 / (0.100158 + haematocrit),
  });
}
