import { requireHaematocrit } from '../require-haematocrit.ts';
import { DomainError } from '../../units/errors.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireNotNegative, requirePositive } from '../../units/require.ts';

export interface QuemadaParameters {
  /** Intrinsic viscosity at rest, where aggregates are whole. */
  readonly k0: number;
  /** Intrinsic viscosity at infinite shear rate. */
  readonly kInfinity: number;
  /** Shear rate at which aggregates half break up, /s. */
  readonly criticalShearRate: number;
}

/**
 * Viscosity of blood by Quemada's law, with given parameters.
 *
 * Formula  η = η_p (1 − k H/2)^(−2), k = (k₀ + k∞ √(γ/γc)) / (1 + √(γ/γc))
 * Units    H fraction, γ and γc /s, η_p mPa.s, result mPa.s
 * Shape    scalars
 * Domain   0 ≤ H < 1, γ ≥ 0, γc > 0, η_p > 0, k H/2 < 1 (packing)
 * Errors   DomainError naming the argument; never NaN
 * Source   Quemada 1978, Rheol Acta 17:632-642 and 643-653
 */
export function quemadaViscosity(
  haematocrit: Quantity<'1'>,
  shearRate: Quantity<'/s'>,
  plasmaViscosity: Quantity<'mPa.s'>,
  { k0, kInfinity, criticalShearRate }: QuemadaParameters,
): Quantity<'mPa.s'> {
  requireHaematocrit(haematocrit);
  requireNotNegative('shearRate', shearRate);
  requirePositive('plasmaViscosity', plasmaViscosity);
  requirePositive('k0', k0);
  requirePositive('kInfinity', kInfinity);
  requirePositive('criticalShearRate', criticalShearRate);
  const root = Math.sqrt(shearRate / criticalShearRate);
  const k = (k0 + kInfinity * root) / (1 + root);
  const packed = (k * haematocrit) / 2;
  if (packed >= 1) {
    throw new DomainError(
      'haematocrit',
      `below ${(2 / k).toPrecision(4)}, where the cells would be packed (k H/2 = 1) at this shear rate`,
      haematocrit,
      'Use the law with coefficients that follow haematocrit, or another shear rate.',
    );
  }
  return quantity(plasmaViscosity / (1 - packed) ** 2);
}
