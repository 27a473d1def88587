import { requireNotNegative, requirePositive } from '../../units/require.ts';

/**
 * Standard deviation of a resistance from those of its two pressures and its flow.
 *
 * Formula  R √((s₁² + s₂²)/ΔP² + (s_Q/Q)²), R = ΔP/Q
 * Units    pressures in one unit, flow and its SD in one unit; result in pressure unit over flow unit
 * Shape    scalars
 * Domain   ΔP > 0, Q > 0, SDs ≥ 0
 * Errors   DomainError naming the argument; never NaN
 * Assumes  first order, independent errors
 * Source   propagation of errors; reference case hd-039
 */
export function resistanceStandardDeviation(
  pressureDifference: number,
  upstreamDeviation: number,
  downstreamDeviation: number,
  flow: number,
  flowDeviation: number,
): number {
  requirePositive('pressureDifference', pressureDifference);
  requirePositive('flow', flow);
  requireNotNegative('upstreamDeviation', upstreamDeviation);
  requireNotNegative('downstreamDeviation', downstreamDeviation);
  requireNotNegative('flowDeviation', flowDeviation);
  return (
    (pressureDifference / flow) *
    Math.hypot(Math.hypot(upstreamDeviation, downstreamDeviation) / pressureDifference, flowDeviation / flow)
  );
}
