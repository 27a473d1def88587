import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive } from '../../units/require.ts';

/**
 * Ratio of flows at constant driving pressure from the ratio of radii.
 *
 * Formula  Q₂/Q₁ = (r₂/r₁)⁴
 * Units    1
 * Shape    scalars
 * Domain   ratio > 0
 * Errors   DomainError naming the argument; never NaN
 * Source   Hagen-Poiseuille; half the diameter gives 1/16; reference case hd-049
 */
export function flowRatioFromRadiusRatio(radiusRatio: Quantity<'1'>): Quantity<'1'> {
  requirePositive('radiusRatio', radiusRatio);
  return quantity(radiusRatio ** 4);
}
