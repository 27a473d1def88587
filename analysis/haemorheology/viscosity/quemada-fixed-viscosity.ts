import { quemadaViscosity } from './quemada-viscosity.ts';
import type { QuemadaParameters } from './quemada-viscosity.ts';
import type { Quantity } from '../../units/quantity.ts';

/** Parameters for a haematocrit near 0.45. */
export const fixedQuemadaParameters: QuemadaParameters = {
  k0: 4.33,
  kInfinity: 2.07,
  criticalShearRate: 1.88,
};

/**
 * Viscosity of blood by Quemada's law with parameters that do not follow haematocrit.
 *
 * Formula  as Quemada's law with k₀ 4.33, k∞ 2.07, γc 1.88 /s unless others are given
 * Units    H fraction, γ /s, η_p mPa.s, result mPa.s
 * Shape    scalars
 * Domain   as Quemada's law; meant for H near 0.45, k H/2 < 1
 * Errors   DomainError naming the argument; never NaN
 * Source   Quemada 1978, parameters read in one public code; reference case hd-070
 */
export function quemadaFixedViscosity(
  haematocrit: Quantity<'1'>,
  shearRate: Quantity<'/s'>,
  plasmaViscosity: Quantity<'mPa.s'>,
  parameters: QuemadaParameters = fixedQuemadaParameters,
): Quantity<'mPa.s'> {
  return quemadaViscosity(haematocrit, shearRate, plasmaViscosity, parameters);
}
