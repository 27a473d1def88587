import { DomainError } from '../../units/errors.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requirePositive } from '../../units/require.ts';

export interface FlowOptions {
  /** The protocol marks the reading as hyperaemia and a person confirmed it. */
  readonly confirmedHyperaemia?: boolean;
}

/**
 * Lets a forearm or calf blood flow through only where a plethysmograph can mean it.
 *
 * Formula  0 < flow ≤ 100, or above 100 when hyperaemia is confirmed
 * Units    mL/min/dL
 * Shape    scalars
 * Domain   finite
 * Errors   DomainError naming the argument; never NaN
 * Source   haemodynamics reference 1.1; peak after ischaemia 50 to 80 (Clin Physiol 1986;6:337)
 */
export function plausibleFlow(
  flow: number,
  { confirmedHyperaemia = false }: FlowOptions,
): Quantity<'mL/min/dL'> {
  requirePositive(
    'forearmBloodFlow',
    flow,
    'Keep the trace, flagged as unusable; a falling volume is no inflow.',
  );
  if (flow > 100 && !confirmedHyperaemia) {
    throw new DomainError(
      'forearmBloodFlow',
      'at most 100 mL/min/dL unless hyperaemia is confirmed',
      flow,
      'Check gain and calibration, or confirm that the protocol marks this reading as hyperaemia.',
    );
  }
  return quantity(flow);
}
