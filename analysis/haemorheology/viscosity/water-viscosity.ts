import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireWithin } from '../../units/require.ts';

/**
 * Viscosity of water, which plasma and high-shear blood follow with temperature to first order.
 *
 * Formula  η = 0.02414 · 10^(247.8/(T + 133.15))
 * Units    T Cel, result mPa.s
 * Shape    scalars
 * Domain   0 ≤ T ≤ 100
 * Errors   DomainError naming the argument; never NaN
 * Source   engineering table (Vogel form); 1.002 at 20, 0.6531 at 40; reference cases hd-084, hd-085
 */
export function waterViscosity(temperature: Quantity<'Cel'>): Quantity<'mPa.s'> {
  requireWithin('temperature', temperature, 0, 100);
  return quantity(0.02414 * 10 ** (247.8 / (temperature + 133.15)));
}
