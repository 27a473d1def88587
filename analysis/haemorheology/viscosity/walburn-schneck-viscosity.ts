import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireNotNegative, requirePositive, requireWithin } from '../../units/require.ts';

/** Total protein minus albumin where none was measured. */
export const usualProteinMinusAlbumin: Quantity<'g/L'> = quantity(25.9);

/**
 * Apparent viscosity of blood by the power law of Walburn and Schneck.
 *
 * Formula  η = 100 C₁ e^(C₂ Hp) e^(C₄ TPMA/Hp²) γ^(−C₃ Hp); C₁ 0.00797 (poise), C₂ 0.0608, C₃ 0.00499, C₄ 14.585 L/g
 * Units    Hp percent, γ /s, TPMA (total protein minus albumin) g/L, result mPa.s
 * Shape    scalars
 * Domain   Hp from 30 to 75, published for 35 to 50; γ > 0, published for 23 to 233 /s; TPMA ≥ 0
 * Errors   DomainError naming the argument; never NaN
 * Assumes  below about 27 % the law turns round (viscosity would rise on dilution), so it is refused below 30 %
 * Source   Walburn & Schneck 1976, Biorheology 13:201 (constants read in two public codes, range from memory);
 *          reference cases hd-065, hd-066
 */
export function walburnSchneckViscosity(
  haematocritPercent: Quantity<'%'>,
  shearRate: Quantity<'/s'>,
  proteinMinusAlbumin = usualProteinMinusAlbumin,
): Quantity<'mPa.s'> {
  requireWithin(
    'haematocrit',
    haematocritPercent,
    30,
    75,
    'Below 30 % the law turns round; use a Quemada or Pries law.',
  );
  requirePositive('shearRate', shearRate);
  requireNotNegative('proteinMinusAlbumin', proteinMinusAlbumin);
  const h = haematocritPercent;
  return quantity(
    0.797 * Math.exp(0.0608 * h + (14.585 * proteinMinusAlbumin) / h ** 2) * shearRate ** (-0.00499 * h),
  );
}
