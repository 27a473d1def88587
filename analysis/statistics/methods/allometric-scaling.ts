import { studentTTwoSided } from '../../numerics/student-t.ts';
import { AnalysisError } from '../core/analysis-error.ts';
import { logarithmsOf, requireSubjects } from '../core/cells.ts';
import { isConstantOnGrid, roundingGrid } from '../core/grid.ts';
import type { Method } from '../core/method.ts';
import { correlation, mean, standardDeviation, sumOfSquares } from '../core/moments.ts';
import { required, type Plan } from '../core/plan.ts';
import type { Dropped, Outcome } from '../core/result.ts';
import { regressOn } from '../core/simple-regression.ts';

import { tPValue } from '../core/t-test.ts';
import { allometricByCondition, type PeakRows } from './allometric-scaling-condition.ts';

/**
 * Allometric scaling of a peak by its baseline: a power law by least squares on logarithms, or, with `condition`, a
 * mixed model of the log ratio.
 *
 * Source  Atkinson and Batterham 2013, Int J Cardiol 168:2949-2951 (from memory)
 */
export const allometricScaling: Method = {
  name: 'allometric_scaling',
  run(plan, table) {
    const { outcome, subject, covariates } = required(plan, 'outcome', 'subject', 'covariates');
    const [peaks, baselines] = [table.numbers(outcome), table.numbers(covariates[0]!)];
    table.positive(outcome, peaks);
    table.positive(covariates[0]!, baselines);
    const data = { subjects: table.keys(subject), peaks, baselines };
    return plan.condition === undefined ? powerLaw(plan, data) : allometricByCondition(plan, table, data);
  },
};

function powerLaw({ confidence }: Plan, { subjects, peaks, baselines }: PeakRows): Outcome {
  if (new Set(subjects).size < subjects.length) throw new AnalysisError('duplicate_cell');
  const isUsed = (_: unknown, row: number) => !Number.isNaN(peaks[row]) && !Number.isNaN(baselines[row]);
  const [peak, baseline] = [peaks.filter(isUsed), baselines.filter(isUsed)];
  const n = peak.length;
  requireSubjects(n, 3);
  const [logPeak, logBaseline] = [logarithmsOf(peak), logarithmsOf(baseline)];
  if (isConstantOnGrid(logBaseline, roundingGrid(logBaseline))) throw new AnalysisError('zero_variance');
  const line = regressOn(logBaseline, logPeak, { confidence });
  const df = n - 2;
  const squares = sumOfSquares(logBaseline);
  const residual_sd = line.slopeSe * Math.sqrt(squares);
  if ((residual_sd ** 2 * df) / n <= (10 * roundingGrid(logPeak, logBaseline)) ** 2) {
    throw new AnalysisError('zero_variance');
  }
  const percent = peak.map((value, i) => (100 * (value - baseline[i]!)) / baseline[i]!);
  const r = correlation(percent, baseline);
  const index = peak.map((value, i) => value / baseline[i]! ** line.slope);
  const tOne = (line.slope - 1) / line.slopeSe;
  return {
    n,
    dropped: subjects.flatMap((subject, row): Dropped[] =>
      isUsed(subject, row) ? [] : [{ subject, reason: 'incomplete' }],
    ),
    estimates: {
      exponent: line.slope,
      exponent_se: line.slopeSe,
      exponent_ci_lower: line.ci_lower,
      exponent_ci_upper: line.ci_upper,
      df,
      t_exponent_zero: line.t,
      p_exponent_zero: line.p_value,
      t_exponent_one: tOne,
      p_exponent_one: tPValue(tOne, df, 'both'),
      log_intercept: line.intercept,
      log_intercept_se: residual_sd * Math.sqrt(1 / n + mean(logBaseline) ** 2 / squares),
      scale_factor: Math.exp(line.intercept),
      residual_sd,
      r_squared: 1 - (residual_sd ** 2 * df) / sumOfSquares(logPeak),
      percent_change_mean: mean(percent),
      percent_change_sd: standardDeviation(percent),
      percent_change_baseline_correlation: r,
      percent_change_baseline_p: r === null ? null : studentTTwoSided(r * Math.sqrt(df / (1 - r * r)), df),
      scaled_index_mean: mean(index),
      scaled_index_sd: standardDeviation(index),
    },
  };
}
