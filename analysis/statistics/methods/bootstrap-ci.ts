import { seededRandom } from '../../numerics/random.ts';
import { bootstrapLimits } from '../core/bootstrap.ts';
import type { Method } from '../core/method.ts';
import { centred, mean, median, standardDeviation } from '../core/moments.ts';
import { varyingPairsOf } from '../core/paired-difference.ts';

/** Values of a statistic in resamples of the subjects, as deviations from the estimate. */
interface Resampled {
  estimate: number;
  deviations: Float64Array;
  below: number;
  leaveOneOut: Float64Array;
}

/** Percentile and BCa bootstrap intervals of the mean or median paired difference. */
export const bootstrapCi: Method = {
  name: 'bootstrap_ci',
  run(plan, table) {
    const { n, difference, rounded, dropped } = varyingPairsOf(plan, table);
    const { resamples, seed } = plan;
    const { estimate, deviations, below, leaveOneOut } =
      plan.statistic === 'mean'
        ? resampleMean(difference, resamples, seed)
        : resampleMedian(rounded, resamples, seed);
    const bias = mean(deviations);
    const standard_error = resamples > 1 ? standardDeviation(deviations) : null;
    const limits = bootstrapLimits(deviations, below, leaveOneOut, plan.confidence);
    const shifted = (limit: number | null) => (limit === null ? null : estimate + limit);
    return {
      n,
      dropped,
      estimates: {
        estimate,
        bias,
        standard_error,
        percentile_ci_lower: shifted(limits.percentile_ci_lower),
        percentile_ci_upper: shifted(limits.percentile_ci_upper),
        bca_ci_lower: shifted(limits.bca_ci_lower),
        bca_ci_upper: shifted(limits.bca_ci_upper),
        ...(plan.statistic === 'mean' && {
          bca_z0: limits.bca_z0,
          bca_acceleration: limits.bca_acceleration,
        }),
      },
    };
  },
};

/** A resample that is the sample again differs from it by rounding only and is not below it. */
function resampleMean(d: Float64Array, resamples: number, seed: number): Resampled {
  const random = seededRandom(seed);
  const n = d.length;
  const deviation = centred(d);
  const rounding = 1e-14 * deviation.reduce((sum, value) => sum + Math.abs(value), 0);
  const deviations = new Float64Array(resamples);
  let below = 0;
  for (let r = 0; r < resamples; r += 1) {
    let sum = 0;
    for (let i = 0; i < n; i += 1) sum += deviation[random.below(n)]!;
    if (sum < -rounding) below += 1;
    deviations[r] = sum / n;
  }
  return { estimate: mean(d), deviations, below, leaveOneOut: deviation.map((value) => -value / (n - 1)) };
}

/** The median of a resample is found by counting how often each of the sorted values was drawn. */
function resampleMedian(d: Float64Array, resamples: number, seed: number): Resampled {
  const random = seededRandom(seed);
  const n = d.length;
  const sorted = d.toSorted();
  const estimate = median(d);
  const counts = new Uint32Array(n);
  const deviations = new Float64Array(resamples);
  const middle = { low: (n + 1) >> 1, high: (n + 2) >> 1 };
  let below = 0;
  for (let r = 0; r < resamples; r += 1) {
    counts.fill(0);
    for (let i = 0; i < n; i += 1) counts[random.below(n)]! += 1;
    let at = 0;
    let drawn = counts[0]!;
    while (drawn < middle.low) drawn += counts[(at += 1)]!;
    const low = sorted[at]!;
    while (drawn < middle.high) drawn += counts[(at += 1)]!;
    const value = (low + sorted[at]!) / 2;
    if (value < estimate) below += 1;
    deviations[r] = value - estimate;
  }
  return { estimate, deviations, below, leaveOneOut: d.map((_, i) => median(d.filter((_, j) => j !== i))) };
}
