import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive, requireWithin } from '../../units/require.ts';

/**
 * Peak diameter scaled by a power of the baseline diameter.
 *
 * Formula  d_peak / d_base^b
 * Units    d mm, b 1, result mm^(1−b)
 * Shape    scalars
 * Domain   both diameters > 0; 0 < b ≤ 2
 * Errors   DomainError naming the argument; never NaN
 * Assumes  b is estimated in the very study (about 0.8 to 0.9 in print), never taken from another
 * Source   Atkinson et al. 2013, J Hypertens 31:287; reference case hd-109
 */
export function allometricDilationRatio(
  baselineDiameter: Quantity<'mm'>,
  peakDiameter: Quantity<'mm'>,
  exponent: Quantity<'1'>,
): Quantity<'{mm_to_the_1-b}'> {
  requirePositive('baselineDiameter', baselineDiameter);
  requirePositive('peakDiameter', peakDiameter);
  requirePositive('exponent', exponent);
  requireWithin('exponent', exponent, 0, 2);
  return quantity(peakDiameter / baselineDiameter ** exponent);
}
