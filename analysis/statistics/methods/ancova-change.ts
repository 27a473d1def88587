import { fUpperTail } from '../../numerics/f-distribution.ts';
import { leastSquares, type LeastSquaresFit } from '../../numerics/linear-algebra-least-squares.ts';
import { bilinearForm, innerProduct } from '../../numerics/linear-algebra.ts';
import { adjustPValues } from '../core/adjust.ts';
import { AnalysisError, invalidPlan } from '../core/analysis-error.ts';
import { requireSubjects } from '../core/cells.ts';
import { roundingGrid } from '../core/grid.ts';
import type { Method } from '../core/method.ts';
import { centred, mean, sumOfSquares } from '../core/moments.ts';
import type { Plan } from '../core/plan.ts';
import type { Row } from '../core/result.ts';
import { tTest, type TTest } from '../core/t-test.ts';
import { changeData, type ChangeData } from './ancova-change-data.ts';

/**
 * Change from baseline by analysis of covariance: follow-up on baseline, covariates and group.
 *
 * Source  Vickers and Altman 2001, BMJ 323:1123-1124
 */
export const ancovaChange: Method = {
  name: 'ancova_change',
  run(plan, table) {
    const data = changeData(plan, table);
    const model = fitModel(plan, data);
    const { groups } = data;
    return {
      n: data.followUp.length,
      dropped: data.dropped,
      estimates: {
        mean_baseline: mean(data.baseline),
        mean_followup: mean(data.followUp),
        ...(groups === null ? changeEstimates(data, model) : groupEstimates(data, model)),
        residual_sd: Math.sqrt(model.variance),
        r_squared: 1 - model.fit.residualSumOfSquares / sumOfSquares(data.followUp),
      },
      tables: groups === null ? {} : groupTables(plan, data, model),
    };
  },
};

/** The fit of follow-up − mean baseline on the columns intercept, baseline, covariates, groups but the first. */
interface ChangeModel {
  readonly columns: readonly Float64Array[];
  readonly y: Float64Array;
  readonly fit: LeastSquaresFit;
  readonly df: number;
  readonly variance: number;
  /** t test of a combination of the coefficients. */
  readonly test: (weights: ArrayLike<number>) => TTest & { estimate: number; standard_error: number };
}

function fitModel(plan: Plan, { followUp, baseline, covariates, groups }: ChangeData): ChangeModel {
  const shift = mean(baseline);
  const y = followUp.map((value) => value - shift);
  const columns = [
    new Float64Array(y.length).fill(1),
    centred(baseline),
    ...covariates.map(centred),
    ...(groups?.levels.slice(1).map((_, i) => groups.positions.map((g) => (g === i + 1 ? 1 : 0))) ?? []).map(
      (column) => Float64Array.from(column),
    ),
  ];
  const p = columns.length;
  const df = y.length - p;
  requireSubjects(y.length, p + 1);
  const fit = leastSquares(columns, y);
  if (fit.rank < p) throw invalidPlan('A covariate follows from the others, or from the group. Take it out.');
  const negligible = (10 * roundingGrid(followUp, baseline)) ** 2 * y.length;
  if (fit.residualSumOfSquares <= negligible) throw new AnalysisError('zero_variance');
  const variance = fit.residualSumOfSquares / df;
  const coefficients = fit.coefficients.map((value) => value!);
  const test = (weights: ArrayLike<number>) => {
    const estimate = innerProduct(weights, coefficients);
    const standard_error = Math.sqrt(variance * bilinearForm(fit.unscaledCovariance, p, weights, weights));
    return { estimate, standard_error, ...tTest(estimate, standard_error, df, plan) };
  };
  return { columns, y, fit, df, variance, test };
}

function changeEstimates({ followUp, baseline }: ChangeData, { columns, test }: ChangeModel) {
  const change = test(unit(columns.length, 0));
  const slope = test(unit(columns.length, 1));
  return {
    mean_change: mean(followUp.map((value, i) => value - baseline[i]!)),
    adjusted_mean_change: change.estimate,
    adjusted_mean_change_se: change.standard_error,
    adjusted_mean_change_ci_lower: change.ci_lower,
    adjusted_mean_change_ci_upper: change.ci_upper,
    t: change.t,
    df: change.df,
    p_value: change.p_value,
    baseline_slope: slope.estimate,
    baseline_slope_se: slope.standard_error,
    baseline_slope_ci_lower: slope.ci_lower,
    baseline_slope_ci_upper: slope.ci_upper,
    change_on_baseline_slope: slope.estimate - 1,
  };
}

function groupEstimates(
  { groups, baseline }: ChangeData,
  { columns, y, fit, df, variance, test }: ChangeModel,
) {
  const extra = groups!.levels.length - 1;
  const p = columns.length;
  const added = (of: LeastSquaresFit, from: number) =>
    of.sequentialSumsOfSquares.slice(from).reduce((sum, square) => sum + square, 0);
  const groupF = added(fit, p - extra) / extra / variance;
  const slope = test(unit(p, 1));
  const centredBaseline = centred(baseline);
  const products = columns
    .slice(p - extra)
    .map((group) => group.map((value, i) => value * centredBaseline[i]!));
  const crossed = leastSquares([...columns, ...products], y);
  const [df1, df2] = [crossed.rank - p, y.length - crossed.rank];
  const homogeneityF =
    df1 > 0 && df2 > 0 ? added(crossed, p) / df1 / (crossed.residualSumOfSquares / df2) : null;
  const estimates = {
    group_f: groupF,
    group_df_1: extra,
    group_df_2: df,
    group_p: fUpperTail(groupF, extra, df),
    baseline_slope: slope.estimate,
    baseline_slope_se: slope.standard_error,
    baseline_slope_t: slope.t,
    baseline_slope_p: slope.p_value,
    slope_homogeneity_f: homogeneityF,
    slope_homogeneity_df_1: df1,
    slope_homogeneity_df_2: df2,
    slope_homogeneity_p: homogeneityF === null ? null : fUpperTail(homogeneityF, df1, df2),
  };
  if (extra !== 1) return estimates;
  const difference = test(unit(p, p - 1).map((weight) => -weight));
  return {
    ...estimates,
    adjusted_difference: difference.estimate,
    adjusted_difference_se: difference.standard_error,
    adjusted_difference_ci_lower: difference.ci_lower,
    adjusted_difference_ci_upper: difference.ci_upper,
    t: difference.t,
    df,
    p_value: difference.p_value,
  };
}

/** Adjusted means of the groups at the overall means, and their differences. */
function groupTables(plan: Plan, { groups, baseline }: ChangeData, { columns, test }: ChangeModel) {
  const { levels, positions } = groups!;
  const p = columns.length;
  const shift = mean(baseline);
  const first = p - levels.length;
  const weightsOf = levels.map((_, g) =>
    unit(p, 0).map((weight, c) => (g > 0 && c === first + g ? 1 : weight)),
  );
  const adjusted_means = levels.map((level, g): Row => {
    const { estimate, standard_error, df, ci_lower, ci_upper } = test(weightsOf[g]!);
    return {
      level,
      n: positions.filter((position) => position === g).length,
      adjusted_mean: estimate + shift,
      standard_error,
      df,
      ci_lower: ci_lower! + shift,
      ci_upper: ci_upper! + shift,
    };
  });
  const pairs = levels.flatMap((level_1, i) =>
    levels.slice(i + 1).map((level_2, offset) => {
      const other = weightsOf[i + 1 + offset]!;
      return { level_1, level_2, ...test(weightsOf[i]!.map((weight, c) => weight - other[c]!)) };
    }),
  );
  const adjusted = adjustPValues(
    pairs.map(({ p_value }) => p_value),
    plan.adjust,
  );
  return { adjusted_means, pairwise: pairs.map((row, i): Row => ({ ...row, p_adjusted: adjusted[i]! })) };
}

function unit(size: number, position: number): Float64Array {
  return Float64Array.from({ length: size }, (_, i) => (i === position ? 1 : 0));
}
