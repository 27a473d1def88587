import { fQuantile, fUpperTail } from '../../numerics/f-distribution.ts';
import { AnalysisError } from '../core/analysis-error.ts';
import { completeCells } from '../core/cells.ts';
import { roundingGrid } from '../core/grid.ts';
import type { Method } from '../core/method.ts';
import { centred, mean } from '../core/moments.ts';

/** Intraclass correlations of subjects by raters: one-way, two-way random and two-way mixed, of single ratings. */
export const icc: Method = {
  name: 'icc',
  run(plan, table) {
    const { columns, dropped } = completeCells(plan, table);
    const squares = meanSquares(columns);
    const { n, k, between, within, raters, error } = squares;
    const tail = (1 - plan.confidence) / 2;
    const oneWayF = { f: between / within, df1: n - 1, df2: n * (k - 1) };
    const twoWayF = { f: between / error, df1: n - 1, df2: (n - 1) * (k - 1) };
    const random = (between - error) / (between + (k - 1) * error + (k * (raters - error)) / n);
    return {
      n,
      dropped,
      estimates: {
        n_raters: k,
        ms_between: between,
        ms_within: within,
        ms_raters: raters,
        ms_error: error,
        ...described(
          'icc_1_1',
          (between - within) / (between + (k - 1) * within),
          limitsOfF(oneWayF, k, tail),
          oneWayF,
        ),
        ...described('icc_2_1', random, limitsOfRandom(random, squares, tail), twoWayF),
        ...described(
          'icc_3_1',
          (between - error) / (between + (k - 1) * error),
          limitsOfF(twoWayF, k, tail),
          twoWayF,
        ),
      },
    };
  },
};

interface MeanSquares {
  n: number;
  k: number;
  between: number;
  within: number;
  raters: number;
  error: number;
}

interface FTest {
  f: number;
  df1: number;
  df2: number;
}

interface Limits {
  lower: number;
  upper: number;
}

function described(
  name: string,
  value: number,
  limits: Limits,
  { f, df1, df2 }: FTest,
): Record<string, number> {
  return {
    [name]: value,
    [`${name}_ci_lower`]: limits.lower,
    [`${name}_ci_upper`]: limits.upper,
    [`${name}_f`]: f,
    [`${name}_df_1`]: df1,
    [`${name}_df_2`]: df2,
    [`${name}_p`]: Number.isNaN(f) ? NaN : fUpperTail(f, df1, df2),
  };
}

/** Mean squares of the two-way table, of values centred over it; raters that agree exactly leave exactly nothing. */
function meanSquares(columns: Float64Array[]): MeanSquares {
  const k = columns.length;
  const n = columns[0]!.length;
  const all = centred(columns.flatMap((column) => [...column]));
  const grid = roundingGrid(...columns);
  if (all.every((value) => Math.abs(value) <= 10 * grid)) throw new AnalysisError('zero_variance');
  const rows = Array.from({ length: n }, (_, i) =>
    Float64Array.from(columns, (_column, j) => all[j * n + i]!),
  );
  const deviations = rows.map(centred);
  const residuals = columns.map((_, j) => centred(deviations.map((row) => row[j]!)));
  const raterMeans = columns.map((_, j) => mean(all.subarray(j * n, (j + 1) * n)));
  return {
    n,
    k,
    between: (k * squaresOf(centred(rows.map(mean)))) / (n - 1),
    within: deviations.reduce((sum, row) => sum + squaresOf(row), 0) / (n * (k - 1)),
    raters: (n * squaresOf(centred(raterMeans))) / (k - 1),
    error: residuals.reduce((sum, column) => sum + squaresOf(column), 0) / ((n - 1) * (k - 1)),
  };
}

function squaresOf(values: Float64Array): number {
  return values.reduce((sum, value) => sum + value ** 2, 0);
}

/** Shrout & Fleiss 1979, Psychol Bull 86:420-428: exact limits of ICC(1,1) and ICC(3,1). */
function limitsOfF({ f, df1, df2 }: FTest, k: number, tail: number): Limits {
  const limit = (x: number) => (x - 1) / (x + k - 1);
  return { lower: limit(f * fQuantile(tail, df2, df1)), upper: limit(f / fQuantile(tail, df1, df2)) };
}

/** Their approximate limits of ICC(2,1), with Satterthwaite's degrees of freedom v. */
function limitsOfRandom(value: number, { n, k, between, raters, error }: MeanSquares, tail: number): Limits {
  const j = raters / error;
  const c = n * (1 + (k - 1) * value) - k * value;
  const v =
    ((k - 1) * (n - 1) * (k * value * j + c) ** 2) / ((n - 1) * k ** 2 * value ** 2 * j ** 2 + c ** 2);
  if (!(v > 0 && Number.isFinite(v))) return { lower: NaN, upper: NaN };
  const a = 1 / fQuantile(tail, v, n - 1);
  const b = 1 / fQuantile(tail, n - 1, v);
  const d = k * raters + (k * n - k - n) * error;
  return {
    lower: (n * (between - a * error)) / (a * d + n * between),
    upper: (n * (b * between - error)) / (d + n * b * between),
  };
}
