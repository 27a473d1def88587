import { leastSquaresLine } from './least-squares-line.ts';
import { plausibleFlow } from './plausible-flow.ts';
import type { FlowOptions } from './plausible-flow.ts';
import type { Quantity } from '../../units/quantity.ts';

/**
 * Forearm blood flow from a stretch of the volume trace, by a least-squares line.
 *
 * Formula  FBF = 60 · OLS slope
 * Units    t s, volume %, FBF mL/min/dL
 * Shape    two series of one length, at least 2 points
 * Domain   times strictly rising; 0 < FBF ≤ 100 unless hyperaemia is confirmed
 * Errors   DomainError naming the argument; never NaN
 * Assumes  the stretch begins after the cuff artefact and spans whole heart beats
 * Source   least squares; window after Junejo et al. 2019, Eur J Appl Physiol; reference case hd-003
 */
export function forearmBloodFlowFromVolumeTrace(
  times: readonly Quantity<'s'>[],
  volume: readonly Quantity<'%'>[],
  options: FlowOptions = {},
): Quantity<'mL/min/dL'> {
  return plausibleFlow(60 * leastSquaresLine(times, volume, 'volume').slope, options);
}
