import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive } from '../../units/require.ts';

/**
 * Total peripheral resistance: no venous term, so not the same as systemic vascular resistance.
 *
 * Formula  TPR = MAP / CO
 * Units    MAP mm[Hg], CO L/min, TPR [wood'U]
 * Shape    scalars
 * Domain   MAP > 0, CO > 0
 * Errors   DomainError naming the argument; never NaN
 * Source   textbook; reference case hd-028
 */
export function totalPeripheralResistance(
  meanArterialPressure: Quantity<'mm[Hg]'>,
  cardiacOutput: Quantity<'L/min'>,
): Quantity<"[wood'U]"> {
  requirePositive('meanArterialPressure', meanArterialPressure);
  requirePositive('cardiacOutput', cardiacOutput);
  return quantity(meanArterialPressure / cardiacOutput);
}
