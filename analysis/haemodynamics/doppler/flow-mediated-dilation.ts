import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive } from '../../units/require.ts';

/**
 * Flow-mediated dilation in percent of the baseline diameter.
 *
 * Formula  FMD = 100 (d_peak − d_base) / d_base
 * Units    d mm, result %
 * Shape    scalars
 * Domain   both > 0
 * Errors   DomainError naming the argument; never NaN
 * Assumes  scales with the baseline diameter: check the allometric slope before comparing groups
 * Source   Thijssen et al. 2019, Eur Heart J 40:2534 (scope); reference case hd-108
 */
export function flowMediatedDilation(
  baselineDiameter: Quantity<'mm'>,
  peakDiameter: Quantity<'mm'>,
): Quantity<'%'> {
  requirePositive('baselineDiameter', baselineDiameter);
  requirePositive('peakDiameter', peakDiameter);
  return quantity((100 * (peakDiameter - baselineDiameter)) / baselineDiameter);
}
