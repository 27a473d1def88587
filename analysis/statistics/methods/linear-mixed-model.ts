import { invalidPlan } from '../core/analysis-error.ts';
import { roundingGrid } from '../core/grid.ts';
import type { Method } from '../core/method.ts';
import { mean } from '../core/moments.ts';
import type { Plan } from '../core/plan.ts';
import { warning } from '../core/result.ts';
import { logColumnUnits } from '../mixed-model/design-coefficients.ts';
import { fitMixedModel, type MixedModelFit } from '../mixed-model/fit.ts';
import { fixedDesign, type FixedDesign } from '../mixed-model/fixed-design.ts';
import { inferenceOf } from '../mixed-model/inference.ts';
import { linearMixedModelRows, type ModelRows } from './linear-mixed-model-rows.ts';
import {
  anovaTable,
  fixedEffectsTable,
  marginalTables,
  varianceComponentsTable,
} from './linear-mixed-model-tables.ts';

/**
 * Linear mixed model of repeated rows of subjects: random intercept, at most one random slope.
 *
 * Source   see `fitMixedModel`, `satterthwaite`, `kenwardRoger`
 */
export const linearMixedModel: Method = {
  name: 'linear_mixed_model',
  check: checkPlan,
  run(plan, table) {
    const rows = linearMixedModelRows(plan, table);
    const termVariables = termsOf(plan).map((columns) =>
      columns.map((column) => rows.variables.get(column)!),
    );
    const design = fixedDesign(rows.outcome.length, termVariables);
    const { fit, shift } = fitRows(plan, rows, design);
    const inference = inferenceOf(fit, plan.df_method);
    const model = { plan, design, fit, inference, shift };
    return {
      n: rows.subjectCount,
      dropped: rows.dropped,
      estimates: estimatesOf(fit, rows.outcome.length),
      tables: {
        fixed_effects: fixedEffectsTable(model),
        variance_components: varianceComponentsTable(model),
        ...(design.terms.length > 1 && { anova: anovaTable(model) }),
        ...(plan.marginal_means && marginalTables(model, plan.marginal_means)),
      },
      warnings: fit.atBoundary ? [warning('variance_at_boundary')] : [],
    };
  },
};

function termsOf(plan: Plan): string[][] {
  return (plan.fixed ?? []).map((term) => [term].flat());
}

function checkPlan(plan: Plan): void {
  const factors = plan.factors ?? [];
  if (plan.df_method === 'kenward_roger' && plan.estimation === 'ML') {
    throw invalidPlan('"df_method": "kenward_roger" needs "estimation": "REML".');
  }
  const slope = plan.random?.slopes?.[0];
  if (slope !== undefined && factors.includes(slope)) {
    throw invalidPlan(`The random slope "${slope}" has to be numeric, not one of the "factors".`);
  }
  const terms = termsOf(plan).map((columns) => JSON.stringify(columns.toSorted()));
  if (new Set(terms).size < terms.length) throw invalidPlan('"fixed" names a term twice.');
  if (!plan.marginal_means) return;
  const { factor, by } = plan.marginal_means;
  const inModel = (column: string) => factors.includes(column) && termsOf(plan).flat().includes(column);
  if (!inModel(factor) || (by !== undefined && !inModel(by))) {
    throw invalidPlan('"marginal_means" needs columns that are among "factors" and in "fixed".');
  }
  if (factor === by) throw invalidPlan('"marginal_means" needs two different columns in "factor" and "by".');
}

function fitRows(plan: Plan, rows: ModelRows, design: FixedDesign): { fit: MixedModelFit; shift: number } {
  const shift = mean(rows.outcome);
  const slope = rows.variables.get(plan.random?.slopes?.[0] ?? '');
  const fit = fitMixedModel({
    outcome: rows.outcome.map((value) => value - shift),
    columns: design.columns,
    subjects: rows.subjects,
    subjectCount: rows.subjectCount,
    slope: slope?.kind === 'covariate' ? slope.values : undefined,
    correlated: plan.random?.correlated,
    estimation: plan.estimation,
    negligible: 10 * roundingGrid(rows.outcome),
    logColumnUnits: logColumnUnits(design),
  });
  return { fit, shift };
}

function estimatesOf(fit: MixedModelFit, rows: number): Record<string, number | null> {
  const { interceptVariance, slopeVariance, covariance, correlation } = fit.randomEffects;
  return {
    n_observations: rows,
    log_likelihood: fit.logLikelihood,
    aic: -2 * fit.logLikelihood + 2 * fit.parameterCount,
    n_parameters: fit.parameterCount,
    subject_variance: interceptVariance,
    residual_variance: fit.residualVariance,
    ...(slopeVariance === null
      ? { icc: interceptVariance / (interceptVariance + fit.residualVariance) }
      : { slope_variance: slopeVariance }),
    ...(covariance !== null && {
      intercept_slope_covariance: covariance,
      intercept_slope_correlation: correlation,
    }),
  };
}
