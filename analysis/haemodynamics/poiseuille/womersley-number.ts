import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive } from '../../units/require.ts';

/**
 * Womersley number: pulsatile inertia against friction. Above 1 the profile is no longer quasi-steady.
 *
 * Formula  α = r √(ω ρ / η), ω = 2π HR/60
 * Units    r m, HR /min, ρ kg/m3, η Pa.s, result 1
 * Shape    scalars
 * Domain   all > 0
 * Errors   DomainError naming the argument; never NaN
 * Source   textbook; reference case hd-054
 */
export function womersleyNumber(
  radius: Quantity<'m'>,
  heartRate: Quantity<'/min'>,
  density: Quantity<'kg/m3'>,
  viscosity: Quantity<'Pa.s'>,
): Quantity<'1'> {
  requirePositive('radius', radius);
  requirePositive('heartRate', heartRate);
  requirePositive('density', density);
  requirePositive('viscosity', viscosity);
  return quantity(radius * Math.sqrt((((2 * Math.PI * heartRate) / 60) * density) / viscosity));
}
