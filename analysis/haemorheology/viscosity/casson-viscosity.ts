import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireNotNegative, requirePositive } from '../../units/require.ts';

/**
 * Apparent viscosity of a Casson fluid.
 *
 * Formula  η = (√(τy/γ) + √ηc)²
 * Units    τy Pa, ηc Pa.s, γ /s, result Pa.s
 * Shape    scalars
 * Domain   τy ≥ 0, ηc > 0, γ > 0 (used for 0.1 to 100 /s); at rest the viscosity of a fluid that yields is infinite
 * Errors   DomainError naming the argument; never NaN
 * Source   Casson 1959; Merrill (from memory); reference case hd-071
 */
export function cassonViscosity(
  yieldStress: Quantity<'Pa'>,
  cassonConstant: Quantity<'Pa.s'>,
  shearRate: Quantity<'/s'>,
): Quantity<'Pa.s'> {
  requireNotNegative('yieldStress', yieldStress);
  requirePositive('cassonConstant', cassonConstant);
  requirePositive('shearRate', shearRate, 'At rest a Casson fluid has no viscosity; name a shear rate.');
  return quantity((Math.sqrt(yieldStress / shearRate) + Math.sqrt(cassonConstant)) ** 2);
}
