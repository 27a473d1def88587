import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireFinite } from '../../units/require.ts';

/**
 * Transpulmonary gradient. A negative one is a measurement error and carries a caution.
 *
 * Formula  TPG = mPAP − PAWP
 * Units    mm[Hg]
 * Shape    scalars
 * Domain   finite
 * Errors   DomainError naming the argument; never NaN
 * Source   definition; reference case hd-031
 */
export function transpulmonaryGradient(
  meanPulmonaryArterialPressure: Quantity<'mm[Hg]'>,
  pulmonaryArteryWedgePressure: Quantity<'mm[Hg]'>,
): Quantity<'mm[Hg]'> {
  requireFinite('meanPulmonaryArterialPressure', meanPulmonaryArterialPressure);
  requireFinite('pulmonaryArteryWedgePressure', pulmonaryArteryWedgePressure);
  return quantity(meanPulmonaryArterialPressure - pulmonaryArteryWedgePressure);
}
