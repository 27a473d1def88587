import { adjustPValues } from '../core/adjust.ts';
import { AnalysisError } from '../core/analysis-error.ts';
import { indexIn, logarithmsOf, requireSubjects } from '../core/cells.ts';
import { isConstantOnGrid, roundingGrid } from '../core/grid.ts';
import { mean } from '../core/moments.ts';
import { required, type Plan } from '../core/plan.ts';
import { warning, type Outcome, type Row } from '../core/result.ts';
import type { Table } from '../core/table.ts';
import { contrastRow } from '../mixed-model/contrast-row.ts';
import { coefficientWeights } from '../mixed-model/design-coefficients.ts';
import { meanWeights } from '../mixed-model/design-hypotheses.ts';
import { fitMixedModel } from '../mixed-model/fit.ts';
import { fixedDesign, type Covariate, type Factor } from '../mixed-model/fixed-design.ts';
import { inferenceOf } from '../mixed-model/inference.ts';
import { positionOf, selectRows } from './linear-mixed-model-rows.ts';

/** Peak and baseline of every row, NaN where empty. */
export interface PeakRows {
  readonly subjects: readonly string[];
  readonly peaks: Float64Array;
  readonly baselines: Float64Array;
}

/** REML mixed model of ln(peak/baseline) on ln baseline and condition with a random intercept of the subject. */
export function allometricByCondition(
  plan: Plan,
  table: Table,
  { subjects, peaks, baselines }: PeakRows,
): Outcome {
  const { condition } = required(plan, 'condition');
  const { confidence } = plan;
  const cells = table.keys(condition);
  const levels = table.levels(condition, plan.levels);
  if (levels.length < 2) throw new AnalysisError('level_missing');
  const positions = indexIn(levels, cells);
  const { used, dropped } = selectRows(table, subjects, (row) => {
    if (positions[row]! < 0) return 'ignored';
    return Number.isNaN(peaks[row]) || Number.isNaN(baselines[row]) ? 'missing' : 'used';
  });
  const subjectPositions = new Map<string, number>();
  const subjectOf = Int32Array.from(used, (row) => positionOf(subjectPositions, subjects[row]!));
  requireSubjects(subjectPositions.size, 2);
  const logPeak = logarithmsOf(Float64Array.from(used, (row) => peaks[row]!));
  const logBaseline = logarithmsOf(Float64Array.from(used, (row) => baselines[row]!));
  if (isConstantOnGrid(logBaseline, roundingGrid(logBaseline))) throw new AnalysisError('zero_variance');
  const ratio = logPeak.map((value, i) => value - logBaseline[i]!);
  const shift = mean(ratio);
  const baseline: Covariate = { kind: 'covariate', name: 'baseline', values: logBaseline };
  const codes = Int32Array.from(used, (row) => positions[row]!);
  const factor: Factor = { kind: 'factor', name: 'condition', levels, codes };
  const design = fixedDesign(used.length, [[baseline], [factor]]);
  const fit = fitMixedModel({
    outcome: ratio.map((value) => value - shift),
    columns: design.columns,
    subjects: subjectOf,
    subjectCount: subjectPositions.size,
    negligible: 10 * roundingGrid(logPeak, logBaseline),
  });
  const inference = inferenceOf(fit);
  const slope = contrastRow(inference.contrast(coefficientWeights(design)[1]!), { confidence });
  const means = levels.map((_, level) => meanWeights(design, new Map([['condition', level]])));
  const adjustedMeans = levels.map((level, i): Row => {
    const row = contrastRow(inference.contrast(means[i]!), { confidence, shift });
    return {
      level,
      log_ratio: row.estimate,
      standard_error: row.standard_error,
      df: row.df,
      ci_lower: row.ci_lower,
      ci_upper: row.ci_upper,
      percent_change: percentOf(row.estimate),
      percent_change_ci_lower: percentOf(row.ci_lower),
      percent_change_ci_upper: percentOf(row.ci_upper),
    };
  });
  const pairs = levels.flatMap((level_1, i) =>
    levels.slice(i + 1).map((level_2, offset) => {
      const other = means[i + 1 + offset]!;
      const weights = means[i]!.map((weight, c) => weight - other[c]!);
      return { level_1, level_2, ...contrastRow(inference.contrast(weights), { confidence }) };
    }),
  );
  const adjusted = adjustPValues(
    pairs.map(({ p_value }) => p_value),
    plan.adjust,
  );
  return {
    n: subjectPositions.size,
    dropped,
    estimates: {
      n_observations: used.length,
      exponent: slope.estimate + 1,
      exponent_se: slope.standard_error,
      exponent_df: slope.df,
      exponent_ci_lower: slope.ci_lower === null ? null : slope.ci_lower + 1,
      exponent_ci_upper: slope.ci_upper === null ? null : slope.ci_upper + 1,
      t_exponent_one: slope.t,
      p_exponent_one: slope.p_value,
      mean_log_baseline: mean(logBaseline),
      subject_variance: fit.randomEffects.interceptVariance,
      residual_variance: fit.residualVariance,
    },
    tables: {
      adjusted_means: adjustedMeans,
      pairwise: pairs.map((row, i) => ({ ...row, p_adjusted: adjusted[i]! })),
    },
    warnings: fit.atBoundary ? [warning('variance_at_boundary')] : [],
  };
}

function percentOf(logRatio: number | null): number | null {
  return logRatio === null ? null : 100 * Math.expm1(logRatio);
}
