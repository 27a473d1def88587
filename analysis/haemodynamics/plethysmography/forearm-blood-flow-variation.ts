import { mean, standardDeviation } from '../../readings/summaries.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireCount, requireEachPositive } from '../../units/require.ts';

/**
 * Coefficient of variation of a block's flow readings.
 *
 * Formula  CV = 100 · SD / mean, SD with n − 1
 * Units    readings mL/min/dL, CV %
 * Shape    one series, at least 2 readings
 * Domain   each reading > 0
 * Errors   DomainError naming the argument; never NaN
 * Source   definition; reference case hd-007
 */
export function forearmBloodFlowVariation(readings: readonly Quantity<'mL/min/dL'>[]): Quantity<'%'> {
  requireCount('readings', readings, 2, 'A spread needs at least two accepted readings.');
  requireEachPositive(
    'readings',
    readings,
    'Mark the reading unusable with its reason; it then leaves the spread.',
  );
  return quantity((100 * standardDeviation(readings)) / mean(readings));
}
