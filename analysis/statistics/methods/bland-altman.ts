import { agreementLimits } from '../core/agreement-limits.ts';
import { invalidPlan } from '../core/analysis-error.ts';
import { isConstantOnGrid } from '../core/grid.ts';
import type { Method } from '../core/method.ts';
import { correlation } from '../core/moments.ts';
import { pairedTTest, varyingPairsOf, type Pairs } from '../core/paired-difference.ts';
import type { Plan } from '../core/plan.ts';
import type { Outcome } from '../core/result.ts';
import { regressOn } from '../core/simple-regression.ts';
import type { Table } from '../core/table.ts';
import { tTest } from '../core/t-test.ts';
import { replicatedConstant, replicatedVarying } from './bland-altman-replicated.ts';

/** Limits of agreement of two methods, from pairs or from replicates. */
export const blandAltman: Method = {
  name: 'bland_altman',
  check(plan) {
    if (plan.design === 'replicated_varying' && plan.replicate === undefined) {
      throw invalidPlan('The design replicated_varying needs "replicate".');
    }
  },
  run(plan, table) {
    const outcome = designs[plan.design](plan, table);
    if (plan.transform !== 'log') return outcome;
    const { bias, lower_limit, upper_limit } = outcome.estimates;
    const ratios = {
      ratio_bias: Math.exp(bias!),
      ratio_lower_limit: Math.exp(lower_limit!),
      ratio_upper_limit: Math.exp(upper_limit!),
    };
    return { ...outcome, estimates: { ...outcome.estimates, ...ratios } };
  },
};

const designs: Record<Plan['design'], (plan: Plan, table: Table) => Outcome> = {
  paired,
  replicated_constant: replicatedConstant,
  replicated_varying: replicatedVarying,
};

/** Bland & Altman 1986, Lancet 327:307-310; standard error of a limit from 1999, Stat Methods Med Res 8:135-160. */
function paired(plan: Plan, table: Table): Outcome {
  const pairs = varyingPairsOf(plan, table);
  const { n, difference, dropped } = pairs;
  const z = plan.limit_multiplier;
  const test = pairedTTest(difference, { confidence: plan.confidence });
  const sd = test.sd_difference;
  const limitSe = sd * Math.sqrt(1 / n + z ** 2 / (2 * (n - 1)));
  const limits = agreementLimits(test.mean_difference, sd, z);
  const aroundLower = tTest(limits.lower_limit, limitSe, n - 1, { confidence: plan.confidence });
  const aroundUpper = tTest(limits.upper_limit, limitSe, n - 1, { confidence: plan.confidence });
  return {
    n,
    dropped,
    estimates: {
      bias_se: test.standard_error,
      bias_ci_lower: test.ci_lower,
      bias_ci_upper: test.ci_upper,
      bias_t: test.t,
      bias_df: test.df,
      bias_p: test.p_value,
      ...limits,
      limit_se: limitSe,
      lower_limit_ci_lower: aroundLower.ci_lower,
      lower_limit_ci_upper: aroundLower.ci_upper,
      upper_limit_ci_lower: aroundUpper.ci_lower,
      upper_limit_ci_upper: aroundUpper.ci_upper,
      ...proportionalBias(pairs, plan),
    },
  };
}

/** Least squares of the difference on the pair mean, where there are three pairs and their means differ. */
function proportionalBias({ n, x, y, difference, grid }: Pairs, plan: Plan): Record<string, number | null> {
  const pairMeans = x.map((value, i) => (value + y[i]!) / 2);
  if (n < 3 || isConstantOnGrid(pairMeans, grid)) return {};
  const fit = regressOn(pairMeans, difference, plan);
  return {
    proportional_slope: fit.slope,
    proportional_intercept: fit.intercept,
    proportional_slope_se: fit.slopeSe,
    proportional_slope_ci_lower: fit.ci_lower,
    proportional_slope_ci_upper: fit.ci_upper,
    proportional_t: fit.t,
    proportional_df: fit.df,
    proportional_p: fit.p_value,
    proportional_correlation: correlation(difference, pairMeans),
  };
}
