import { AnalysisError } from '../core/analysis-error.ts';
import { requireSubjects } from '../core/cells.ts';
import { equivalenceBounds, equivalenceTest } from '../core/equivalence.ts';
import { isConstantOnGrid, roundingGrid } from '../core/grid.ts';
import type { Method } from '../core/method.ts';
import { mean, standardDeviation } from '../core/moments.ts';
import type { Plan } from '../core/plan.ts';
import { warning, type Dropped, type Row } from '../core/result.ts';
import {
  adjustedEffects,
  CARRYOVER,
  PERIOD,
  pooledEffect,
  TREATMENT,
  type ByOrder,
  type EffectTest,
} from '../variance/crossover-effects.ts';
import { crossoverData, type CrossoverData, type CrossoverSubject } from './crossover-2x2-data.ts';
import { mixedCrossover } from './crossover-2x2-mixed.ts';

const boundsOf = (plan: Plan) => equivalenceBounds(plan, { ratios: plan.transform === 'log' });

/** Two-treatment, two-period cross-over: t tests of complete subjects, and a mixed model of every observed row. */
export const crossover2x2: Method = {
  name: 'crossover_2x2',
  check: boundsOf,
  run(plan, table) {
    const data = crossoverData(plan, table);
    const { complete, dropped } = completeSubjects(data, plan.baseline !== undefined);
    const byOrder = (value: (subject: CrossoverSubject) => number): ByOrder => ({
      ab: Float64Array.from(complete.filter(({ isAb }) => isAb).map(value)),
      ba: Float64Array.from(complete.filter(({ isAb }) => !isAb).map(value)),
    });
    const differences = byOrder(({ outcome: [first, second] }) => first - second);
    const sums = byOrder(({ outcome: [first, second] }) => first + second);
    requireSubjects(Math.min(differences.ab.length, differences.ba.length), 2);
    const grid = roundingGrid(present(data.subjects.flatMap(({ outcome }) => outcome)));
    refuseConstant(differences, grid);
    const { confidence } = plan;
    const treatment = pooledEffect(differences, TREATMENT, confidence);
    const mixed = mixedCrossover(data, confidence);
    return {
      n: complete.length,
      dropped,
      estimates: {
        n_ab: differences.ab.length,
        n_ba: differences.ba.length,
        ...named(treatment, 'treatment_'),
        ...named(pooledEffect(differences, PERIOD, confidence), 'period_'),
        ...named(pooledEffect(sums, CARRYOVER, confidence), 'carryover_'),
        ...mixed.estimates,
        ...ratioOf(plan, treatment, 'treatment_'),
        ...equivalenceOf(plan, treatment, 'treatment_'),
        ...(plan.baseline !== undefined &&
          adjusted(
            plan,
            differences,
            byOrder(({ baseline: [first, second] }) => first - second),
            {
              outcome: grid,
              baseline: roundingGrid(present(data.subjects.flatMap(({ baseline }) => baseline))),
            },
          )),
      },
      tables: { cell_means: cellMeans(data, complete) },
      warnings: mixed.atBoundary ? [warning('variance_at_boundary')] : [],
    };
  },
};

function completeSubjects(
  { subjects }: CrossoverData,
  needsBaseline: boolean,
): { complete: CrossoverSubject[]; dropped: Dropped[] } {
  const complete: CrossoverSubject[] = [];
  const dropped: Dropped[] = [];
  for (const subject of subjects) {
    const isIncomplete = subject.outcome.some(Number.isNaN);
    if (isIncomplete) dropped.push({ subject: subject.subject, reason: 'incomplete' });
    else if (needsBaseline && subject.baseline.some(Number.isNaN)) {
      dropped.push({ subject: subject.subject, reason: 'missing_covariate' });
    } else complete.push(subject);
  }
  return { complete, dropped };
}

function refuseConstant({ ab, ba }: ByOrder, grid: number): void {
  if (isConstantOnGrid(ab, grid) && isConstantOnGrid(ba, grid)) throw new AnalysisError('zero_variance');
}

/** Estimates from least squares of the period difference on order and baseline difference. */
function adjusted(
  plan: Plan,
  outcome: ByOrder,
  baseline: ByOrder,
  grids: { outcome: number; baseline: number },
): Record<string, number | null> {
  refuseConstant(baseline, grids.baseline);
  const effects = adjustedEffects(outcome, baseline, plan.confidence);
  const n = outcome.ab.length + outcome.ba.length;
  if (effects.residualSumOfSquares <= (10 * grids.outcome) ** 2 * n) throw new AnalysisError('zero_variance');
  const { effect: baseline_coefficient, ...coefficient } = effects.coefficient;
  return {
    ...named(effects.treatment, 'adjusted_treatment_'),
    ...named(effects.period, 'adjusted_period_'),
    baseline_coefficient,
    ...named(coefficient, 'baseline_coefficient_'),
    ...ratioOf(plan, effects.treatment, 'adjusted_treatment_'),
    ...equivalenceOf(plan, effects.treatment, 'adjusted_treatment_'),
  };
}

function ratioOf(
  plan: Plan,
  { effect, ci_lower, ci_upper }: EffectTest,
  prefix: string,
): Record<string, number | null> {
  if (plan.transform !== 'log') return {};
  const ratio = { ratio: effect, ratio_ci_lower: ci_lower, ratio_ci_upper: ci_upper };
  return named(
    Object.fromEntries(
      Object.entries(ratio).map(([key, value]) => [key, value === null ? null : Math.exp(value)]),
    ),
    prefix,
  );
}

function equivalenceOf(
  plan: Plan,
  { effect, se, df }: EffectTest,
  prefix: string,
): Record<string, number | null> {
  const bounds = boundsOf(plan);
  if (bounds === null) return {};
  const test = equivalenceTest(effect, se, df, bounds, plan.confidence);
  const { t_lower, p_lower, t_upper, p_upper, equivalent } = test;
  const equivalence = {
    p_value: test.p_value,
    ci_level: test.ci_level,
    ci_lower: test.ci_lower,
    ci_upper: test.ci_upper,
    ...(plan.transform === 'log' && {
      ratio_ci_lower: Math.exp(test.ci_lower),
      ratio_ci_upper: Math.exp(test.ci_upper),
    }),
  };
  return named(
    { t_lower, p_lower, t_upper, p_upper, equivalent, ...named(equivalence, 'equivalence_') },
    prefix,
  );
}

function cellMeans({ treatments, periods }: CrossoverData, complete: readonly CrossoverSubject[]): Row[] {
  return [true, false].flatMap((isAb) =>
    ([0, 1] as const).map((period) => {
      const values = complete
        .filter((subject) => subject.isAb === isAb)
        .map(({ outcome }) => outcome[period]);
      return {
        first_treatment: treatments[isAb ? 0 : 1],
        period: periods[period],
        treatment: treatments[isAb === (period === 0) ? 0 : 1],
        n: values.length,
        mean: mean(values),
        sd: standardDeviation(values),
      };
    }),
  );
}

/** The values with their keys prefixed. */
function named<Value>(values: Readonly<Record<string, Value>>, prefix: string): Record<string, Value> {
  return Object.fromEntries(Object.entries(values).map(([key, value]) => [`${prefix}${key}`, value]));
}

function present(values: readonly number[]): number[] {
  return values.filter((value) => !Number.isNaN(value));
}
