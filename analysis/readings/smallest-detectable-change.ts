import { DomainError } from '../units/errors.ts';
import { requireNotNegative, requirePositive } from '../units/require.ts';

/**
 * Smallest change in one person that exceeds the laboratory's own replicate noise.
 *
 * Formula  q √2 s_w / √m
 * Units    those of s_w; on natural logs exp(±) gives the ratios
 * Shape    scalars
 * Domain   s_w ≥ 0; q > 0 (1.96 for 95 % with a well-known s_w, else a t quantile); m ≥ 1 replicates averaged at each time
 * Errors   DomainError naming the argument; never NaN
 * Assumes  independent errors of one spread at both times
 * Source   Bland & Altman 1996, BMJ 313:744 (repeatability 1.96 √2 s_w)
 */
export function smallestDetectableChange(withinDeviation: number, quantile: number, replicates = 1): number {
  requireNotNegative('withinDeviation', withinDeviation);
  requirePositive('quantile', quantile);
  if (!Number.isInteger(replicates) || replicates < 1) {
    throw new DomainError('replicates', 'a whole number of at least 1', replicates);
  }
  return (quantile * Math.SQRT2 * withinDeviation) / Math.sqrt(replicates);
}
