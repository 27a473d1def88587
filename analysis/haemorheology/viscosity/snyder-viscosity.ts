import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireWithin } from '../../units/require.ts';

/**
 * High-shear viscosity of blood from haematocrit and temperature.
 *
 * Formula  η = 2.03 e^((0.0322 − 0.000108 T) Hp − 0.02 T)
 * Units    Hp percent, T Cel, result mPa.s
 * Shape    scalars
 * Domain   0 ≤ Hp ≤ 75; T used for 20 to 40
 * Errors   DomainError naming the argument; never NaN
 * Source   Snyder 1971 as coded in one public repository; reference case hd-082
 */
export function snyderViscosity(
  haematocritPercent: Quantity<'%'>,
  temperature: Quantity<'Cel'>,
): Quantity<'mPa.s'> {
  requireWithin('haematocrit', haematocritPercent, 0, 75);
  requireWithin('temperature', temperature, 0, 45);
  return quantity(
    2.03 * Math.exp((0.0322 - 0.000108 * temperature) * haematocritPercent - 0.02 * temperature),
  );
}
