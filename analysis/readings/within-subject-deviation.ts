import { standardDeviation } from './summaries.ts';
import { DomainError } from '../units/errors.ts';

/**
 * Within-subject standard deviation from replicate sets, pooled. For pairs it is √(Σd²/(2n)).
 *
 * Formula  √(Σ SSᵢ / Σ (nᵢ − 1))
 * Units    those of the values (natural logs for ratios)
 * Shape    sets of replicates; sets of one add nothing
 * Domain   finite; at least one set of 2
 * Errors   DomainError naming the argument; never NaN
 * Assumes  one spread for all subjects
 * Source   Bland & Altman 1996, BMJ 313:744
 */
export function withinSubjectDeviation(sets: readonly (readonly number[])[]): {
  readonly deviation: number;
  readonly df: number;
} {
  let squares = 0;
  let df = 0;
  for (const values of sets) {
    if (values.length < 2) continue;
    squares += standardDeviation(values) ** 2 * (values.length - 1);
    df += values.length - 1;
  }
  if (df === 0) throw new DomainError('sets', 'at least one set of two replicates', sets.length);
  return { deviation: Math.sqrt(squares / df), df };
}
