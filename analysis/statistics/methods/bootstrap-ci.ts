import { seededRandom } from '../../numerics/random.ts';
import { bootstrapLimits, quantileOfResamples, type ResampledStatistic } from '../core/bootstrap.ts';
import { resampledMedianDistribution } from '../core/median-distribution.ts';
import type { Method } from '../core/method.ts';
import { centred, mean, median, standardDeviation } from '../core/moments.ts';
import { varyingPairsOf } from '../core/paired-difference.ts';
import type { Plan } from '../core/plan.ts';

/** A statistic over resamples. */
interface Resampled extends ResampledStatistic {
  estimate: number;
  bias: number;
  standardError: number | null;
}

/**
 * Percentile and BCa bootstrap intervals of the mean or the median paired difference.
 *
 * The mean is resampled as often as the plan says. The median has few possible values, whose probabilities over all
 * resamples are known: they are used, so that its interval does not depend on `resamples` and `seed`.
 */
export const bootstrapCi: Method = {
  name: 'bootstrap_ci',
  run(plan, table) {
    const { n, difference, rounded, dropped } = varyingPairsOf(plan, table);
    const isMean = plan.statistic === 'mean';
    const resampled = isMean ? resampleMean(difference, rounded, plan) : allResamplesOfMedian(rounded);
    const { bca_z0, bca_acceleration, ...limits } = bootstrapLimits(resampled, plan.confidence);
    return {
      n,
      dropped,
      estimates: {
        estimate: resampled.estimate,
        bias: resampled.bias,
        standard_error: resampled.standardError,
        ...limits,
        ...(isMean && { bca_z0, bca_acceleration }),
      },
    };
  },
};

/**
 * Means of resamples of the grid-rounded differences d: their limits are order statistics. A resample that is the sample
 * again differs from it by rounding only and is not below it.
 */
function resampleMean(difference: Float64Array, d: Float64Array, { resamples, seed }: Plan): Resampled {
  const random = seededRandom(seed);
  const n = d.length;
  const total = d.reduce((sum, value) => sum + value, 0);
  const rounding = 1e-14 * d.reduce((sum, value) => sum + Math.abs(value), 0);
  const means = new Float64Array(resamples);
  let below = 0;
  for (let r = 0; r < resamples; r += 1) {
    let sum = 0;
    for (let i = 0; i < n; i += 1) sum += d[random.below(n)]!;
    if (sum < total - rounding) below += 1;
    means[r] = sum / n;
  }
  return {
    estimate: mean(difference),
    bias: mean(means) - mean(d),
    standardError: resamples > 1 ? standardDeviation(means) : null,
    shareBelow: below / resamples,
    quantile: quantileOfResamples(means.sort()),
    leaveOneOut: centred(difference).map((value) => -value / (n - 1)),
  };
}

function allResamplesOfMedian(d: Float64Array): Resampled {
  const estimate = median(d);
  const { values, probabilities } = resampledMedianDistribution(d);
  const deviations = values.map((value) => value - estimate);
  const expected = (f: (deviation: number) => number) =>
    deviations.reduce((sum, deviation, i) => sum + probabilities[i]! * f(deviation), 0);
  const bias = expected((deviation) => deviation);
  return {
    estimate,
    bias,
    standardError: Math.sqrt(expected((deviation) => (deviation - bias) ** 2)),
    shareBelow: expected((deviation) => (deviation < 0 ? 1 : 0)),
    quantile: (p) => {
      let reached = 0;
      const index = probabilities.findIndex((probability) => (reached += probability) >= p);
      return values[index < 0 ? values.length - 1 : index]!;
    },
    leaveOneOut: d.map((_, i) => median(d.filter((_value, j) => j !== i))),
  };
}
