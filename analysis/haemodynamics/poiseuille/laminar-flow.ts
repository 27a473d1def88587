import { entranceLength } from './entrance-length.ts';
import { reynoldsNumber } from './reynolds-number.ts';
import { bloodDensity } from '../pressure/hydrostatic-pressure.ts';
import { DomainError } from '../../units/errors.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive } from '../../units/require.ts';

/**
 * Whether Poiseuille's law may be used for a flow in a tube: its Reynolds number and the length its profile needs.
 *
 * Formula  Re = ρ V d / η with V = Q/(π r²); Le = 0.06 Re d
 * Units    Q m3/s, η Pa.s, r m, ρ kg/m3
 * Shape    scalars
 * Domain   all > 0; Re ≤ 4000
 * Errors   DomainError naming the argument; never NaN
 * Source   haemodynamics reference section 4
 */
export function laminarFlow(
  flow: Quantity<'m3/s'>,
  viscosity: Quantity<'Pa.s'>,
  radius: Quantity<'m'>,
  density = bloodDensity,
): { readonly reynolds: Quantity<'1'>; readonly entrance: Quantity<'m'> } {
  requirePositive('flow', flow);
  requirePositive('radius', radius);
  const meanVelocity = quantity<'m/s'>(flow / (Math.PI * radius ** 2));
  const diameter = quantity<'m'>(2 * radius);
  const reynolds = reynoldsNumber(density, meanVelocity, diameter, viscosity);
  if (reynolds > 4000) {
    throw new DomainError(
      'reynolds',
      'at most 4000: the flow is turbulent',
      reynolds,
      "Poiseuille's law does not hold here.",
    );
  }
  return { reynolds, entrance: entranceLength(reynolds, diameter) };
}
