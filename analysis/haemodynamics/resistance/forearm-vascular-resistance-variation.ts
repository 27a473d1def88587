import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireNotNegative, requirePositive, requireWithin } from '../../units/require.ts';

/**
 * Coefficient of variation of forearm vascular resistance from the spread of pressure and flow.
 *
 * Formula  √(CV_P² + CV_Q² − 2ρ CV_P CV_Q)
 * Units    pressures mm[Hg], flows mL/min/dL, result 1
 * Shape    scalars
 * Domain   MAP > 0, FBF > 0, SDs ≥ 0, −1 ≤ ρ ≤ 1
 * Errors   DomainError naming the argument; never NaN
 * Assumes  first order; ρ = 0 unless pressure and flow share noise
 * Source   propagation of errors; reference case hd-040
 */
export function forearmVascularResistanceVariation(
  meanArterialPressure: Quantity<'mm[Hg]'>,
  pressureDeviation: Quantity<'mm[Hg]'>,
  forearmBloodFlow: Quantity<'mL/min/dL'>,
  flowDeviation: Quantity<'mL/min/dL'>,
  correlation: Quantity<'1'> = quantity(0),
): Quantity<'1'> {
  requirePositive('meanArterialPressure', meanArterialPressure);
  requirePositive('forearmBloodFlow', forearmBloodFlow);
  requireNotNegative('pressureDeviation', pressureDeviation);
  requireNotNegative('flowDeviation', flowDeviation);
  requireWithin('correlation', correlation, -1, 1);
  const pressure = pressureDeviation / meanArterialPressure;
  const flow = flowDeviation / forearmBloodFlow;
  return quantity(Math.sqrt(Math.max(0, pressure ** 2 + flow ** 2 - 2 * correlation * pressure * flow)));
}
