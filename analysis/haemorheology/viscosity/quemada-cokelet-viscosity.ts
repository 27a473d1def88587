import { quemadaViscosity } from './quemada-viscosity.ts';
import type { QuemadaParameters } from './quemada-viscosity.ts';
import type { Quantity } from '../../units/quantity.ts';

/**
 * Viscosity of blood by Quemada's law with Cokelet's coefficients, which follow haematocrit.
 *
 * Formula  k₀ = e^(3.874 − 10.41H + 13.80H² − 6.738H³); k∞ = e^(1.3435 − 2.803H + 2.711H² − 0.6479H³);
 *          γc = e^(−6.1508 + 27.923H − 25.60H² + 3.697H³)
 * Units    H fraction, γ /s, η_p mPa.s, result mPa.s
 * Shape    scalars
 * Domain   0 ≤ H < 1, fitted for 0.1 to 0.65; γ ≥ 0, monotone in H from 0.05 /s upward; η_p > 0
 * Errors   DomainError naming the argument; never NaN
 * Source   coefficients tabulated by Hund et al. 2017, Fluids 2:10, table 2 (read in a public code); reference cases hd-067, hd-068
 */
export function quemadaCokeletViscosity(
  haematocrit: Quantity<'1'>,
  shearRate: Quantity<'/s'>,
  plasmaViscosity: Quantity<'mPa.s'>,
): Quantity<'mPa.s'> {
  return quemadaViscosity(haematocrit, shearRate, plasmaViscosity, cokeletParameters(haematocrit));
}

/** Cokelet's coefficients of Quemada's law at a haematocrit. */
export function cokeletParameters(h: number): QuemadaParameters {
  return {
    k0: Math.exp(3.874 - 10.41 * h + 13.8 * h ** 2 - 6.738 * h ** 3),
    kInfinity: Math.exp(1.3435 - 2.803 * h + 2.711 * h ** 2 - 0.6479 * h ** 3),
    criticalShearRate: Math.exp(-6.1508 + 27.923 * h - 25.6 * h ** 2 + 3.697 * h ** 3),
  };
}
