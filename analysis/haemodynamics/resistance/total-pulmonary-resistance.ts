import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive } from '../../units/require.ts';

/**
 * Total pulmonary resistance: no wedge term, so not pulmonary vascular resistance.
 *
 * Formula  mPAP / CO
 * Units    mPAP mm[Hg], CO L/min, result [wood'U]
 * Shape    scalars
 * Domain   mPAP > 0, CO > 0
 * Errors   DomainError naming the argument; never NaN
 * Source   textbook
 */
export function totalPulmonaryResistance(
  meanPulmonaryArterialPressure: Quantity<'mm[Hg]'>,
  cardiacOutput: Quantity<'L/min'>,
): Quantity<"[wood'U]"> {
  requirePositive('meanPulmonaryArterialPressure', meanPulmonaryArterialPressure);
  requirePositive('cardiacOutput', cardiacOutput);
  return quantity(meanPulmonaryArterialPressure / cardiacOutput);
}
