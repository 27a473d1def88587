import { studentTQuantile } from '../../numerics/student-t.ts';
import { AnalysisError } from '../core/analysis-error.ts';
import { areasUnderCurve } from '../core/area-under-curve.ts';
import { fitDoseResponse, type DoseResponseModel } from '../core/dose-response-fit.ts';
import type { Method } from '../core/method.ts';
import { required, type Plan } from '../core/plan.ts';
import { warning, type Dropped, type Outcome } from '../core/result.ts';
import type { Table } from '../core/table.ts';

/** Least-squares dose–response curve over all rows, and the area under each subject's curve. */
export const doseResponse: Method = {
  name: 'dose_response',
  run(plan, table) {
    const { x, y, subjects, dropped } = completeRowsOf(plan, table);
    const fitted = plan.model === 'none' ? {} : curveEstimates(x, y, plan.model, plan.confidence);
    const estimates = { n_observations: y.length, ...fitted };
    if (subjects === null) return { n: y.length, estimates };
    const { rows, summary, incomplete } = areasUnderCurve(subjects, x, y);
    return {
      n: rows.length,
      dropped,
      estimates: { ...estimates, ...summary },
      tables: { auc: rows },
      warnings: incomplete ? [warning('incomplete_auc')] : [],
    };
  },
};

interface CompleteRows {
  x: Float64Array;
  y: Float64Array;
  subjects: string[] | null;
  dropped: Dropped[];
}

function completeRowsOf(plan: Plan, table: Table): CompleteRows {
  const { outcome, dose } = required(plan, 'outcome', 'dose');
  const y = table.numbers(outcome);
  const x = table.numbers(dose);
  const subjects = plan.subject === undefined ? null : table.keys(plan.subject);
  const isComplete = (row: number) => !Number.isNaN(x[row]!) && !Number.isNaN(y[row]!);
  const missing = new Map<string, number[]>();
  subjects?.forEach((name, row) => {
    if (!isComplete(row)) missing.set(name, [...(missing.get(name) ?? []), table.rowNumber(row)]);
  });
  return {
    x: x.filter((_, row) => isComplete(row)),
    y: y.filter((_, row) => isComplete(row)),
    subjects: subjects?.filter((_, row) => isComplete(row)) ?? null,
    dropped: [...missing].map(([subject, rows]) => ({ subject, reason: 'missing_value', rows })),
  };
}

function curveEstimates(
  x: Float64Array,
  y: Float64Array,
  model: DoseResponseModel,
  confidence: number,
): Outcome['estimates'] {
  if (new Set(x).size < 3 || x.length < 4) throw new AnalysisError('too_few_doses');
  const fit = fitDoseResponse(x, y, model);
  if (fit === null) throw new AnalysisError('no_convergence');
  const df = y.length - 3;
  const variance = fit.residualSumOfSquares / df;
  const t = -studentTQuantile((1 - confidence) / 2, df);
  const described = fit.parameters.flatMap(({ name, value, unscaledVariance }) => {
    const se = Math.sqrt(variance * unscaledVariance);
    return [
      [name, value],
      [`${name}_se`, se],
      [`${name}_ci_lower`, value - t * se],
      [`${name}_ci_upper`, value + t * se],
    ] as [string, number][];
  });
  return {
    ...Object.fromEntries(described),
    df,
    residual_sd: Math.sqrt(variance),
    residual_ss: fit.residualSumOfSquares,
  };
}
