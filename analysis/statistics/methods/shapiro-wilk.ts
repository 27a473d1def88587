import { normalQuantile, normalUpperTail } from '../../numerics/normal.ts';
import { AnalysisError } from '../core/analysis-error.ts';
import { outcomeValues, requireSubjects } from '../core/cells.ts';
import { isConstantOnGrid, roundingGrid } from '../core/grid.ts';
import type { Method } from '../core/method.ts';
import { centred, mean, standardDeviation } from '../core/moments.ts';
import { pairsOf } from '../core/paired-difference.ts';
import { required, requireConditionOfLevels, type Plan } from '../core/plan.ts';
import type { Dropped } from '../core/result.ts';
import type { Table } from '../core/table.ts';

/** Shapiro–Wilk test of normality, of paired differences or of one value a subject, with the moments. */
export const shapiroWilk: Method = {
  name: 'shapiro_wilk',
  check: requireConditionOfLevels,
  run(plan, table) {
    const { values, dropped } =
      plan.levels?.length === 2 ? differencesFor(plan, table) : singleValues(plan, table);
    if (values.length > 5000) throw new AnalysisError('too_many_subjects');
    const { w, pValue } = shapiroWilkTest(values);
    const deviations = centred(values);
    const moment = (power: number) => deviations.reduce((sum, d) => sum + d ** power, 0) / values.length;
    return {
      n: values.length,
      dropped,
      estimates: {
        w,
        p_value: pValue,
        mean: mean(values),
        sd: standardDeviation(values),
        skewness: moment(3) / moment(2) ** 1.5,
        excess_kurtosis: moment(4) / moment(2) ** 2 - 3,
      },
    };
  },
};

interface Sample {
  values: Float64Array;
  dropped: Dropped[];
}

function differencesFor(plan: Plan, table: Table): Sample {
  const { rounded, constant, dropped } = pairsOf(plan, table, { least: 3 });
  if (constant) throw new AnalysisError('zero_variance');
  return { values: rounded, dropped };
}

function singleValues(plan: Plan, table: Table): Sample {
  const { subject } = required(plan, 'subject');
  const all = outcomeValues(plan, table);
  const subjects = table.keys(subject);
  const used = rowsOfLevels(plan, table);
  const names = used.map((row) => subjects[row]!);
  if (new Set(names).size < names.length) throw new AnalysisError('duplicate_cell');
  const present = used.filter((row) => !Number.isNaN(all[row]!));
  const values = Float64Array.from(present, (row) => all[row]!);
  requireSubjects(values.length, 3);
  if (isConstantOnGrid(values, roundingGrid(values))) throw new AnalysisError('zero_variance');
  const empty = used.filter((row) => Number.isNaN(all[row]!));
  return { values, dropped: empty.map((row) => ({ subject: subjects[row]!, reason: 'incomplete' })) };
}

/** Rows of the plan's levels, or all rows of a plan without a condition. */
function rowsOfLevels(plan: Plan, table: Table): number[] {
  const rows = Array.from({ length: table.size }, (_, row) => row);
  if (plan.condition === undefined) return rows;
  const conditions = table.keys(plan.condition);
  const levels = new Set(table.levels(plan.condition, plan.levels));
  return rows.filter((row) => levels.has(conditions[row]!));
}

/**
 * W and its p-value for 3 to 5000 values that are not all equal.
 *
 * 1 − W is computed as the residual of the ordered values about the weights, so that a W close to 1 keeps its p-value.
 * Source   Royston 1995, Appl Stat 44:547-551 (AS R94); constants as in the reference set's README
 */
function shapiroWilkTest(values: Float64Array): { w: number; pValue: number } {
  const n = values.length;
  const x = centred(values.toSorted());
  const a = weights(n);
  const projection = x.reduce((sum, value, i) => sum + a[i]! * value, 0);
  const squares = x.reduce((sum, value) => sum + value ** 2, 0);
  const rest = x.reduce((sum, value, i) => sum + (value - a[i]! * projection) ** 2, 0) / squares;
  const w = 1 - rest;
  return { w, pValue: n === 3 ? exactPValue(w) : approximatePValue(rest, n) };
}

function weights(n: number): Float64Array {
  if (n === 3) return Float64Array.of(-Math.SQRT1_2, 0, Math.SQRT1_2);
  const m = Float64Array.from({ length: n }, (_, i) => normalQuantile((i + 1 - 0.375) / (n + 0.25)));
  const squares = m.reduce((sum, value) => sum + value ** 2, 0);
  const u = 1 / Math.sqrt(n);
  const last = m[n - 1]! / Math.sqrt(squares) + polynomial(lastWeight, u);
  const second = m[n - 2]! / Math.sqrt(squares) + polynomial(secondWeight, u);
  const ends = n > 5 ? 2 : 1;
  const outer = ends === 2 ? m[n - 1]! ** 2 + m[n - 2]! ** 2 : m[n - 1]! ** 2;
  const phi = (squares - 2 * outer) / (1 - 2 * (ends === 2 ? last ** 2 + second ** 2 : last ** 2));
  const a = m.map((value) => value / Math.sqrt(phi));
  const fixed = ends === 2 ? [last, second] : [last];
  fixed.forEach((weight, i) => {
    a[n - 1 - i] = weight;
    a[i] = -weight;
  });
  return a;
}

function exactPValue(w: number): number {
  return Math.max(0, (6 / Math.PI) * (Math.asin(Math.sqrt(w)) - Math.asin(Math.sqrt(0.75))));
}

function approximatePValue(rest: number, n: number): number {
  const logRest = Math.log(rest);
  if (n <= 11) {
    const gamma = -2.273 + 0.459 * n;
    if (logRest >= gamma) return 1e-99;
    return normalUpperTail(
      (-Math.log(gamma - logRest) - polynomial(smallMean, n)) / Math.exp(polynomial(smallSpread, n)),
    );
  }
  const l = Math.log(n);
  return normalUpperTail((logRest - polynomial(largeMean, l)) / Math.exp(polynomial(largeSpread, l)));
}

function polynomial(coefficients: readonly number[], x: number): number {
  return coefficients.reduceRight((sum, coefficient) => sum * x + coefficient, 0);
}

const lastWeight = [0, 0.221157, -0.147981, -2.07119, 4.434685, -2.706056];
const secondWeight = [0, 0.042981, -0.293762, -1.752461, 5.682633, -3.582633];
const smallMean = [0.544, -0.39978, 0.025054, -0.0006714];
const smallSpread = [1.3822, -0.77857, 0.062767, -0.0020322];
const largeMean = [-1.5861, -0.31082, -0.083751, 0.0038915];
const largeSpread = [-0.4803, -0.082676, 0.0030302];
