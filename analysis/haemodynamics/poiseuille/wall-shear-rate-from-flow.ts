import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive } from '../../units/require.ts';

/**
 * Shear rate at the wall of a tube from volume flow.
 *
 * Formula  γ = 4 Q / (π r³)
 * Units    Q m3/s, r m, γ /s
 * Shape    scalars
 * Domain   Q > 0, r > 0
 * Errors   DomainError naming the argument; never NaN
 * Source   Poiseuille; reference case hd-059
 */
export function wallShearRateFromFlow(flow: Quantity<'m3/s'>, radius: Quantity<'m'>): Quantity<'/s'> {
  requirePositive('flow', flow);
  requirePositive('radius', radius);
  return quantity((4 * flow) / (Math.PI * radius ** 3));
}
