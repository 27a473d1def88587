import { pairedLogChanges } from './geometric-mean-ratio.ts';
import { mean, standardDeviation } from '../../readings/summaries.ts';
import { DomainError } from '../../units/errors.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireCount } from '../../units/require.ts';

/**
 * Paired t statistic of the log-changes.
 *
 * Formula  mean / (SD/√n) of ln(after/before), df n − 1
 * Units    both series in one unit, result 1
 * Shape    two series of one length, paired, at least 3 pairs
 * Domain   all > 0; log-changes not all equal
 * Errors   DomainError naming the argument; never NaN
 * Source   Student 1908; reference case hd-104
 */
export function pairedLogT(before: readonly number[], after: readonly number[]): Quantity<'1'> {
  requireCount('before', before, 3, 'A paired test needs at least three pairs; show the pairs instead.');
  const changes = pairedLogChanges(before, after);
  const spread = standardDeviation(changes);
  if (spread === 0)
    throw new DomainError('after', 'changed by different ratios', after, 'Without spread there is no test.');
  return quantity(mean(changes) / (spread / Math.sqrt(changes.length)));
}
