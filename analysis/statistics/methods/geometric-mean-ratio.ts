import type { Method } from '../core/method.ts';
import { mean } from '../core/moments.ts';
import { pairedTTest, varyingPairsOf } from '../core/paired-difference.ts';

/** Ratio of geometric means: the paired t test on natural logarithms, back-transformed. */
export const geometricMeanRatio: Method = {
  name: 'geometric_mean_ratio',
  run(plan, table) {
    const { n, x, y, difference, dropped } = varyingPairsOf({ ...plan, transform: 'log' }, table);
    const { confidence, direction } = plan;
    const test = pairedTTest(difference, { confidence, direction, nullValue: Math.log(plan.null_ratio) });
    return {
      n,
      dropped,
      estimates: {
        geometric_mean_x: Math.exp(mean(x)),
        geometric_mean_y: Math.exp(mean(y)),
        ratio: Math.exp(test.mean_difference),
        ci_lower: test.ci_lower === null ? null : Math.exp(test.ci_lower),
        ci_upper: test.ci_upper === null ? null : Math.exp(test.ci_upper),
        percent_change: 100 * Math.expm1(test.mean_difference),
        log_mean_difference: test.mean_difference,
        log_sd_difference: test.sd_difference,
        log_standard_error: test.standard_error,
        t: test.t,
        df: test.df,
        p_value: test.p_value,
        within_subject_cv: Math.sqrt(Math.expm1(test.sd_difference ** 2 / 2)),
      },
    };
  },
};
