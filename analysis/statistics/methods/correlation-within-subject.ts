import { fUpperTail } from '../../numerics/f-distribution.ts';
import { normalQuantile } from '../../numerics/normal.ts';
import { invalidPlan } from '../core/analysis-error.ts';
import { requireSubjects } from '../core/cells.ts';
import { isConstantOnGrid, roundingGrid } from '../core/grid.ts';
import type { Method } from '../core/method.ts';
import { centred, mean } from '../core/moments.ts';
import { required, type Plan } from '../core/plan.ts';
import type { Dropped } from '../core/result.ts';
import type { Table } from '../core/table.ts';

/** Correlation of two variables within subjects: analysis of covariance of y on subject and x. */
export const correlationWithinSubject: Method = {
  name: 'correlation_within_subject',
  run(plan, table) {
    const { groups, dropped } = repeatedValues(plan, table);
    requireSubjects(groups.length, 2);
    const [allX, allY] = [join(groups.map((group) => group.x)), join(groups.map((group) => group.y))];
    const gridX = roundingGrid(allX);
    if (groups.every((group) => isConstantOnGrid(group.x, gridX))) {
      throw invalidPlan('The covariate does not vary within any subject, so it has no slope there.');
    }
    const x = join(groups.map((group) => centred(group.x)));
    const y = join(groups.map((group) => centred(group.y)));
    const observations = x.length;
    const df = observations - groups.length - 1;
    const squaresX = dot(x, x);
    const slope = dot(x, y) / squaresX;
    const residuals = y.map((value, i) => value - slope * x[i]!);
    const error = dot(residuals, residuals);
    const explained = slope ** 2 * squaresX;
    const f = explained / (error / df);
    const r = Math.sign(slope) * Math.sqrt(explained / (explained + error));
    const margin = -normalQuantile((1 - plan.confidence) / 2) / Math.sqrt(df - 1);
    return {
      n: groups.length,
      dropped,
      estimates: {
        n_observations: observations,
        r,
        df,
        ci_lower: Math.tanh(Math.atanh(r) - margin),
        ci_upper: Math.tanh(Math.atanh(r) + margin),
        f,
        p_value: Number.isNaN(f) ? null : fUpperTail(f, 1, df),
        slope,
        slope_se: Math.sqrt(error / df / squaresX),
        r_between: betweenSubjects(groups, gridX, roundingGrid(allY)),
      },
    };
  },
};

interface Group {
  x: Float64Array;
  y: Float64Array;
}

/** Pairs by subject, rows without x or y left out first, then subjects with fewer than two. */
function repeatedValues(plan: Plan, table: Table): { groups: Group[]; dropped: Dropped[] } {
  const { outcome, subject, covariates } = required(plan, 'outcome', 'subject', 'covariates');
  const y = table.numbers(outcome);
  const x = table.numbers(covariates[0]!);
  const bySubject = new Map<string, { used: number[]; missing: number[] }>();
  table.keys(subject).forEach((name, row) => {
    const rows = bySubject.get(name) ?? { used: [], missing: [] };
    (Number.isNaN(x[row]!) || Number.isNaN(y[row]!) ? rows.missing : rows.used).push(row);
    bySubject.set(name, rows);
  });
  const groups: Group[] = [];
  const dropped: Dropped[] = [];
  for (const [name, { used, missing }] of bySubject) {
    if (used.length < 2) dropped.push({ subject: name, reason: 'single_measurement' });
    else {
      groups.push({
        x: Float64Array.from(used, (row) => x[row]!),
        y: Float64Array.from(used, (row) => y[row]!),
      });
      if (missing.length > 0) {
        dropped.push({
          subject: name,
          reason: 'missing_value',
          rows: missing.map((row) => table.rowNumber(row)),
        });
      }
    }
  }
  return { groups, dropped };
}

/** Correlation of the subject means, weighted by their numbers of rows; null where a variable's means are all equal. */
function betweenSubjects(groups: readonly Group[], gridX: number, gridY: number): number | null {
  const meansX = Float64Array.from(groups, (group) => mean(group.x));
  const meansY = Float64Array.from(groups, (group) => mean(group.y));
  if (isConstantOnGrid(meansX, gridX) || isConstantOnGrid(meansY, gridY)) return null;
  const weights = groups.map((group) => group.x.length);
  const [a, b] = [weightedCentred(meansX, weights), weightedCentred(meansY, weights)];
  const weighted = (u: Float64Array, v: Float64Array) =>
    weights.reduce((sum, w, i) => sum + w * u[i]! * v[i]!, 0);
  return weighted(a, b) / Math.sqrt(weighted(a, a) * weighted(b, b));
}

function weightedCentred(values: Float64Array, weights: readonly number[]): Float64Array {
  const shifted = values.map((value) => value - values[0]!);
  const total = weights.reduce((sum, weight) => sum + weight, 0);
  const centre = weights.reduce((sum, weight, i) => sum + weight * shifted[i]!, 0) / total;
  return shifted.map((value) => value - centre);
}

function join(lists: readonly Float64Array[]): Float64Array {
  return Float64Array.from(lists.flatMap((list) => [...list]));
}

function dot(a: Float64Array, b: Float64Array): number {
  return a.reduce((sum, value, i) => sum + value * b[i]!, 0);
}
