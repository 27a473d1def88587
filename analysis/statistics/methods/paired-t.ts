import { findRoot } from '../../numerics/find-root.ts';
import { logGamma } from '../../numerics/log-gamma.ts';
import { noncentralTCdf, noncentralTUpperTail } from '../../numerics/noncentral-t.ts';
import { normalQuantile } from '../../numerics/normal.ts';
import type { Method } from '../core/method.ts';
import { correlation, mean, standardDeviation, variance } from '../core/moments.ts';
import { pairedTTest, varyingPairsOf } from '../core/paired-difference.ts';

/** Paired t test with standardised effect sizes and their noncentral-t intervals. */
export const pairedT: Method = {
  name: 'paired_t',
  run(plan, table) {
    const { n, x, y, difference, dropped } = varyingPairsOf(plan, table);
    const { confidence, direction, null_value: nullValue } = plan;
    const { n: _, ...test } = pairedTTest(difference, { confidence, direction, nullValue });
    const { mean_difference, sd_difference, standard_error, ci_lower, ci_upper } = test;
    const [low, high] = noncentralityLimits(mean_difference / standard_error, n - 1, confidence);
    const averageSd = Math.sqrt((variance(x) + variance(y)) / 2);
    const correction = n > 2 ? smallSampleCorrection(n - 1) : NaN;
    return {
      n,
      dropped,
      estimates: {
        mean_x: mean(x),
        mean_y: mean(y),
        sd_x: standardDeviation(x),
        sd_y: standardDeviation(y),
        correlation: correlation(x, y),
        ...test,
        cohen_dz: mean_difference / sd_difference,
        cohen_dz_ci_lower: low / Math.sqrt(n),
        cohen_dz_ci_upper: high / Math.sqrt(n),
        hedges_g_av: (correction * mean_difference) / averageSd,
        hedges_g_av_ci_lower: (correction * low * standard_error) / averageSd,
        hedges_g_av_ci_upper: (correction * high * standard_error) / averageSd,
        ...(plan.transform === 'log' && {
          ratio: Math.exp(mean_difference),
          ratio_ci_lower: ci_lower === null ? null : Math.exp(ci_lower),
          ratio_ci_upper: ci_upper === null ? null : Math.exp(ci_upper),
        }),
      },
    };
  },
};

/** J of Hedges 1981: Γ(df/2) / (√(df/2) Γ((df − 1)/2)). */
function smallSampleCorrection(df: number): number {
  return Math.exp(logGamma(df / 2) - 0.5 * Math.log(df / 2) - logGamma((df - 1) / 2));
}

/** δ with P(T ≤ t | δ) = 1 − α/2 and α/2: the noncentralities that the observed t does not contradict. */
function noncentralityLimits(t: number, df: number, confidence: number): [number, number] {
  const tail = (1 - confidence) / 2;
  const z = -normalQuantile(tail);
  const spread = Math.sqrt(1 + (t * t) / (2 * df));
  return [
    solve((delta) => noncentralTUpperTail(t, df, delta), t - z * spread, -spread),
    solve((delta) => noncentralTCdf(t, df, delta), t + z * spread, spread),
  ];

  /** From a normal approximation as the guess; the probability shrinks in the direction of the step. */
  function solve(probability: (delta: number) => number, guess: number, step: number): number {
    const gap = (delta: number) => Math.log(Math.max(probability(delta), 1e-300) / tail);
    let near = guess - step / 4;
    let far = guess + step / 4;
    for (let stride = step; gap(near) < 0; stride *= 2) near -= stride;
    for (let stride = step; gap(far) > 0; stride *= 2) far += stride;
    return findRoot(gap, near, far, 1e-13);
  }
}
