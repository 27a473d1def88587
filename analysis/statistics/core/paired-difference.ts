import { AnalysisError } from './analysis-error.ts';
import { completeCells } from './cells.ts';
import { gridSteps, isConstantOnGrid, roundingGrid } from './grid.ts';
import { mean, standardDeviation } from './moments.ts';
import type { Plan } from './plan.ts';
import type { Dropped } from './result.ts';
import type { Table } from './table.ts';
import { tTest, type Direction, type TTest } from './t-test.ts';

/** Differences x − y of two columns, as they are and on the rounding grid of both. */
export interface Differences {
  difference: Float64Array;
  /** On the grid: for ranks, signs, medians and zeros. */
  rounded: Float64Array;
  grid: number;
  /** All grid-rounded differences are equal. */
  constant: boolean;
}

/** The pairs of a two-level plan. */
export interface Pairs extends Differences {
  n: number;
  subjects: string[];
  x: Float64Array;
  y: Float64Array;
  dropped: Dropped[];
}

/** Mean difference of two columns with its paired t test. */
export interface PairedTTest extends TTest {
  n: number;
  mean_difference: number;
  sd_difference: number;
  standard_error: number;
}

export function differencesOf(x: ArrayLike<number>, y: ArrayLike<number>): Differences {
  const difference = Float64Array.from(x, (value, i) => value - y[i]!);
  const grid = roundingGrid(x, y);
  return {
    difference,
    rounded: difference.map((d) => gridSteps(d, grid) * grid),
    grid,
    constant: isConstantOnGrid(difference, grid),
  };
}

/** Complete pairs of the plan's two levels, difference first − second. Errors: those of `completeCells`. */
export function pairsOf(plan: Plan, table: Table, { least = 2 }: { least?: number } = {}): Pairs {
  const cells = completeCells(plan, table, { least });
  const [x, y] = cells.columns as [Float64Array, Float64Array];
  return { n: x.length, subjects: cells.subjects, x, y, dropped: cells.dropped, ...differencesOf(x, y) };
}

/** The pairs, refused as zero_variance when all grid-rounded differences are equal. */
export function varyingPairsOf(plan: Plan, table: Table): Pairs {
  const pairs = pairsOf(plan, table);
  if (pairs.constant) throw new AnalysisError('zero_variance');
  return pairs;
}

/** Paired t test of differences that vary (see `Differences.constant`); at least two of them. */
export function pairedTTest(
  difference: Float64Array,
  options: { confidence: number; nullValue?: number; direction?: Direction },
): PairedTTest {
  const n = difference.length;
  const mean_difference = mean(difference);
  const sd_difference = standardDeviation(difference);
  const standard_error = sd_difference / Math.sqrt(n);
  return {
    n,
    mean_difference,
    sd_difference,
    standard_error,
    ...tTest(mean_difference, standard_error, n - 1, options),
  };
}
