import { mean } from '../../readings/summaries.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireCount, requireEachPositive } from '../../units/require.ts';

/**
 * Mean of a block's accepted flow readings.
 *
 * Formula  Σ FBF / n
 * Units    mL/min/dL
 * Shape    one series, at least 1 reading
 * Domain   each reading > 0: a bad trace is kept and flagged, never averaged silently
 * Errors   DomainError naming the argument; never NaN
 * Source   definition; reference case hd-006
 */
export function meanForearmBloodFlow(readings: readonly Quantity<'mL/min/dL'>[]): Quantity<'mL/min/dL'> {
  requireCount('readings', readings, 1);
  requireEachPositive(
    'readings',
    readings,
    'Mark the reading unusable with its reason; it then leaves the mean.',
  );
  return quantity(mean(readings));
}
