import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireNotNegative } from '../../units/require.ts';

/**
 * Apparent viscosity by Carreau's law with constants for normal blood. It knows no haematocrit: forbidden in the split.
 *
 * Formula  η = η∞ + (η₀ − η∞)(1 + (λγ)²)^((n−1)/2); η₀ 56, η∞ 3.45 mPa.s, λ 3.313 s, n 0.3568
 * Units    γ /s, result mPa.s
 * Shape    scalars
 * Domain   γ ≥ 0
 * Errors   DomainError naming the argument; never NaN
 * Source   Cho & Kensey 1991, Biorheology 28:241 (constants read in a public code); reference case hd-072
 */
export function carreauViscosity(shearRate: Quantity<'/s'>): Quantity<'mPa.s'> {
  requireNotNegative('shearRate', shearRate);
  return quantity(3.45 + (56 - 3.45) * (1 + (3.313 * shearRate) ** 2) ** ((0.3568 - 1) / 2));
}
