import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireNotNegative, requirePositive } from '../../units/require.ts';

/**
 * Hindrance: flow resistance with the blood's viscosity divided out.
 *
 * Resistance differs between two visits because the vessels changed or because the blood did.
 * Poiseuille's law separates them: R = 8ηL / (πr⁴), so Z = R / η keeps only the geometry.
 *
 * Formula  Z = R / η
 * Units    R Pa.s/m3 and η Pa.s give Z in m-3; a tissue-normalised R in Pa.s gives Z in 1 (the tissue volume cancels)
 * Shape    scalars; map over visits for a series
 * Domain   R finite and ≥ 0, η finite and > 0, both from one visit and one limb
 * Errors   DomainError naming the argument; never NaN
 * Assumes  steady laminar flow of a Newtonian fluid in rigid tubes. Blood is shear-thinning:
 *          report the shear rate at which η was taken beside Z
 * Source   Sutera & Skalak 1993, Annu Rev Fluid Mech 25:1-19; Lamport's concept (from memory); reference case hd-046
 *
 *
 * @example hindrance<'Pa.s/m3'>(quantity(1.44e8), quantity(0.0036)) // 4e10
 */
export function hindrance<Unit extends 'Pa.s/m3' | 'Pa.s'>(
  resistance: Quantity<Unit>,
  viscosity: Quantity<'Pa.s'>,
): Quantity<Unit extends 'Pa.s' ? '1' : 'm-3'> {
  requireNotNegative('resistance', resistance);
  requirePositive('viscosity', viscosity);
  return quantity(resistance / viscosity);
}
