import { chiSquareQuantile } from '../../numerics/chi-square.ts';
import { AnalysisError } from '../core/analysis-error.ts';
import { logarithmsOf, requireSubjects } from '../core/cells.ts';
import { isConstantOnGrid, roundingGrid } from '../core/grid.ts';
import type { Method } from '../core/method.ts';
import { mean, sumOfSquares, variance } from '../core/moments.ts';
import { oneWayBySubject } from '../core/one-way.ts';
import { required, requireConditionOfLevels, type Plan } from '../core/plan.ts';
import { warning } from '../core/result.ts';
import type { Table } from '../core/table.ts';

/** Within-subject standard deviation, repeatability coefficient and coefficients of variation of repeated values. */
export const repeatability: Method = {
  name: 'repeatability',
  check: requireConditionOfLevels,
  run(plan, table) {
    const bySubject = valuesBySubject(plan, table);
    const names = [...bySubject.keys()];
    const single = names.filter((name) => bySubject.get(name)!.length < 2);
    const groups = [...bySubject.values()]
      .filter((group) => group.length >= 2)
      .map((group) => Float64Array.from(group));
    requireSubjects(groups.length, 2);
    const grid = roundingGrid(...groups);
    if (groups.every((group) => isConstantOnGrid(group, grid))) throw new AnalysisError('zero_variance');
    const { msBetween, msWithin, dfWithin, effectiveSize, ...counts } = oneWayBySubject(groups);
    const tail = (1 - plan.confidence) / 2;
    const within = Math.sqrt(msWithin);
    const lower = Math.sqrt((dfWithin * msWithin) / chiSquareQuantile(1 - tail, dfWithin));
    const upper = Math.sqrt((dfWithin * msWithin) / chiSquareQuantile(tail, dfWithin));
    const toCoefficient = plan.limit_multiplier * Math.SQRT2;
    const positive = groups.every((group) => group.every((value) => value > 0));
    return {
      n: groups.length,
      dropped: single.map((subject) => ({ subject, reason: 'single_measurement' })),
      estimates: {
        n_observations: counts.observations,
        mean: counts.mean,
        ms_between: msBetween,
        ms_within: msWithin,
        df_within: dfWithin,
        within_subject_sd: within,
        within_subject_sd_ci_lower: lower,
        within_subject_sd_ci_upper: upper,
        between_subject_sd: Math.sqrt(Math.max(0, (msBetween - msWithin) / effectiveSize)),
        repeatability_coefficient: toCoefficient * within,
        repeatability_coefficient_ci_lower: toCoefficient * lower,
        repeatability_coefficient_ci_upper: toCoefficient * upper,
        icc_1_1: (msBetween - msWithin) / (msBetween + (effectiveSize - 1) * msWithin),
        cv_root_mean_square: positive ? rootMeanSquareVariation(groups) : null,
        cv_log: positive ? logarithmicVariation(groups, dfWithin) : null,
      },
      warnings: positive ? [] : [warning('non_positive_values')],
    };
  },
};

/** Values of each subject in the rows of the plan's levels (all rows without a condition), empty cells left out. */
function valuesBySubject(plan: Plan, table: Table): Map<string, number[]> {
  const { outcome, subject } = required(plan, 'outcome', 'subject');
  const values = table.numbers(outcome);
  const subjects = table.keys(subject);
  const conditions = plan.condition === undefined ? null : table.keys(plan.condition);
  const levels = new Set(plan.condition === undefined ? [] : table.levels(plan.condition, plan.levels));
  const result = new Map<string, number[]>();
  subjects.forEach((name, row) => {
    if (conditions !== null && !levels.has(conditions[row]!)) return;
    const list = result.get(name) ?? [];
    if (!Number.isNaN(values[row]!)) list.push(values[row]!);
    result.set(name, list);
  });
  return result;
}

/** √mean(s²/mean²), Hyslop & White 2009, as a fraction. */
function rootMeanSquareVariation(groups: readonly Float64Array[]): number {
  return Math.sqrt(mean(groups.map((group) => variance(group) / mean(group) ** 2)));
}

/** exp(pooled SD of logarithms) − 1; Bland & Altman 1996, BMJ 313:106. */
function logarithmicVariation(groups: readonly Float64Array[], dfWithin: number): number {
  const squares = groups.reduce((sum, group) => sum + sumOfSquares(logarithmsOf(group)), 0);
  return Math.expm1(Math.sqrt(squares / dfWithin));
}
