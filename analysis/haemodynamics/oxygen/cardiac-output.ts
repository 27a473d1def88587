import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive } from '../../units/require.ts';

/**
 * Cardiac output from heart rate and stroke volume.
 *
 * Formula  CO = HR · SV / 1000
 * Units    HR /min, SV mL, CO L/min
 * Shape    scalars
 * Domain   both > 0
 * Errors   DomainError naming the argument; never NaN
 * Source   definition; reference case hd-124
 */
export function cardiacOutput(heartRate: Quantity<'/min'>, strokeVolume: Quantity<'mL'>): Quantity<'L/min'> {
  requirePositive('heartRate', heartRate);
  requirePositive('strokeVolume', strokeVolume);
  return quantity((heartRate * strokeVolume) / 1000);
}
