import { DomainError } from '../../units/errors.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireFinite, requirePositive } from '../../units/require.ts';

export const standardGravity: Quantity<'m/s2'> = quantity(9.80665);
export const bloodDensity: Quantity<'kg/m3'> = quantity(1060);

/**
 * Pressure of a column of fluid: what to subtract from a reading taken that far below the heart.
 *
 * Formula  ΔP = ρ g h; pressure at heart level = reading − ΔP
 * Units    ρ kg/m3, g m/s2, h m (how far the measuring point lies below the heart), ΔP Pa
 * Shape    scalars
 * Domain   ρ > 0, g > 0, |h| ≤ 0.6 unless the measurement is on a standing leg
 * Errors   DomainError naming the argument; never NaN
 * Assumes  arm above the heart reads low: h is negative there. 1 cm of blood is 0.780 mmHg; 13.6 cm per 10 mmHg is water
 * Source   statics; measured by Raamat et al. 2009, Med Eng Phys 31:522; reference cases hd-018, hd-019
 */
export function hydrostaticPressure(
  height: Quantity<'m'>,
  density = bloodDensity,
  gravity = standardGravity,
  standingLeg = false,
): Quantity<'Pa'> {
  requirePositive('density', density);
  requirePositive('gravity', gravity);
  requireFinite('height', height);
  if (Math.abs(height) > 0.6 && !standingLeg) {
    throw new DomainError(
      'height',
      'within 0.6 m of the heart',
      height,
      'Check the unit, or mark a standing leg measurement.',
    );
  }
  return quantity(density * gravity * height);
}
