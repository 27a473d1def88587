import { waterViscosity } from './water-viscosity.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive, requireWithin } from '../../units/require.ts';

/**
 * A viscosity brought from the temperature at which it was measured to another one.
 *
 * Formula  η(T₂) = η(T₁) η_w(T₂) / η_w(T₁)
 * Units    η mPa.s, T Cel
 * Shape    scalars
 * Domain   η > 0; both temperatures from 10 to 42
 * Errors   DomainError naming the argument; never NaN
 * Assumes  plasma and high-shear blood follow water; below 20 blood rises more, and at low shear this is a floor
 * Source   common practice; Eckmann 2000 (strength of the effect); reference case hd-086
 */
export function temperatureCorrectedViscosity(
  viscosity: Quantity<'mPa.s'>,
  measuredAt: Quantity<'Cel'>,
  wantedAt: Quantity<'Cel'>,
): Quantity<'mPa.s'> {
  requirePositive('viscosity', viscosity);
  const remedy = 'A viscosity needs the temperature at which it was measured, 10 to 42 Cel.';
  requireWithin('measuredAt', measuredAt, 10, 42, remedy);
  requireWithin('wantedAt', wantedAt, 10, 42, remedy);
  return quantity((viscosity * waterViscosity(wantedAt)) / waterViscosity(measuredAt));
}
