import { DomainError } from '../../units/errors.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';

/**
 * Form factor that rises with the logarithm of heart rate.
 *
 * Formula  k = 0.086 ln(HR − 41.2) + 0.079
 * Units    HR /min, k 1
 * Shape    scalars
 * Domain   HR > 45
 * Errors   DomainError naming the argument; never NaN
 * Assumes  from a preprint; gives 1/3 at 60 and 1/2 at 175
 * Source   abstract of the preprint on a logarithmic form factor; reference case hd-014
 */
export function formFactorFromHeartRate(heartRate: Quantity<'/min'>): Quantity<'1'> {
  if (!(heartRate > 45 && heartRate <= 250)) {
    throw new DomainError(
      'heartRate',
      'above 45 and at most 250 /min',
      heartRate,
      'Use a fixed form factor below 45 /min.',
    );
  }
  return quantity(0.086 * Math.log(heartRate - 41.2) + 0.079);
}
