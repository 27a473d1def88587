import { logChange } from './log-change.ts';
import { mean } from '../../readings/summaries.ts';
import { DomainError } from '../../units/errors.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireCount } from '../../units/require.ts';

/**
 * Geometric mean of the ratios after/before.
 *
 * Formula  exp(mean ln(after/before))
 * Units    both series in one unit, result 1
 * Shape    two series of one length, paired, at least 1 pair
 * Domain   all > 0
 * Errors   DomainError naming the argument; never NaN
 * Source   definition; reference case hd-103
 */
export function geometricMeanRatio(before: readonly number[], after: readonly number[]): Quantity<'1'> {
  return quantity(Math.exp(mean(pairedLogChanges(before, after))));
}

/** ln(after/before) of each pair; names the pair that has no logarithm. */
export function pairedLogChanges(before: readonly number[], after: readonly number[]): number[] {
  requireCount('before', before, 1);
  if (after.length !== before.length) {
    throw new DomainError(
      'after',
      `as many values as before (${before.length})`,
      after.length,
      'Give one value of each pair.',
    );
  }
  return before.map((value, index) =>
    logChange(value, after[index]!, { before: `before[${index + 1}]`, after: `after[${index + 1}]` }),
  );
}
