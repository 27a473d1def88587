import { plausibleFlow } from './plausible-flow.ts';
import type { FlowOptions } from './plausible-flow.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireFinite } from '../../units/require.ts';

/**
 * Forearm blood flow from the slope of relative limb volume.
 *
 * With venous outflow stopped the limb swells at the rate of arterial inflow; 1 %/min is 1 mL per 100 mL per min.
 *
 * Formula  FBF = 60 s
 * Units    s %/s, FBF mL/min/dL
 * Shape    scalars
 * Domain   0 < FBF ≤ 100, or above when hyperaemia is confirmed
 * Errors   DomainError naming the argument; never NaN
 * Assumes  calibrated signal in percent of limb volume; collecting cuff below diastolic pressure; hand excluded
 * Source   Wilkinson & Webb 2001, Br J Clin Pharmacol 52:631-646; reference case hd-001
 *
 *
 * @example forearmBloodFlowFromPercentSlope(quantity(0.05)) // 3
 */
export function forearmBloodFlowFromPercentSlope(
  slope: Quantity<'%/s'>,
  options: FlowOptions = {},
): Quantity<'mL/min/dL'> {
  requireFinite('slope', slope);
  return plausibleFlow(60 * slope, options);
}
