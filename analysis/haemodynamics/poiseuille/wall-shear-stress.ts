import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireFinite, requirePositive } from '../../units/require.ts';

/**
 * Shear stress at the wall from viscosity and shear rate.
 *
 * Formula  τ = η γ
 * Units    η Pa.s, γ /s, τ Pa
 * Shape    scalars
 * Domain   η > 0, γ finite
 * Errors   DomainError naming the argument; never NaN
 * Assumes  η taken at that shear rate
 * Source   definition of viscosity; reference case hd-060
 */
export function wallShearStress(viscosity: Quantity<'Pa.s'>, shearRate: Quantity<'/s'>): Quantity<'Pa'> {
  requirePositive('viscosity', viscosity);
  requireFinite('shearRate', shearRate);
  return quantity(viscosity * shearRate);
}
