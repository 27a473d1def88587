import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireNotNegative } from '../../units/require.ts';

/**
 * Apparent viscosity by the Carreau-Yasuda law with constants for normal blood. Knows no haematocrit: forbidden in the split.
 *
 * Formula  η = η∞ + (η₀ − η∞)(1 + (λγ)^a)^((n−1)/a); η₀ 56, η∞ 3.45 mPa.s, λ 1.902 s, n 0.22, a 1.25
 * Units    γ /s, result mPa.s
 * Shape    scalars
 * Domain   γ ≥ 0
 * Errors   DomainError naming the argument; never NaN
 * Source   Cho & Kensey 1991, Biorheology 28:241 (constants read in two public codes); reference case hd-073
 */
export function carreauYasudaViscosity(shearRate: Quantity<'/s'>): Quantity<'mPa.s'> {
  requireNotNegative('shearRate', shearRate);
  return quantity(3.45 + (56 - 3.45) * (1 + (1.902 * shearRate) ** 1.25) ** ((0.22 - 1) / 1.25));
}
