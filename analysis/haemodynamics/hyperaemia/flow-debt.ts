import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive } from '../../units/require.ts';

/**
 * Blood flow that an occlusion withheld.
 *
 * Formula  baseline FBF · minutes of occlusion
 * Units    FBF mL/min/dL, occlusion min, result mL/dL
 * Shape    scalars
 * Domain   both > 0
 * Errors   DomainError naming the argument; never NaN
 * Source   definition; reference case hd-113
 */
export function flowDebt(baselineFlow: Quantity<'mL/min/dL'>, occlusion: Quantity<'min'>): Quantity<'mL/dL'> {
  requirePositive('baselineFlow', baselineFlow);
  requirePositive('occlusion', occlusion);
  return quantity(baselineFlow * occlusion);
}
