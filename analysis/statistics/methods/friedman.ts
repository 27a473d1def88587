import { chiSquareUpperTail } from '../../numerics/chi-square.ts';
import { fUpperTail } from '../../numerics/f-distribution.ts';
import { studentTTwoSided } from '../../numerics/student-t.ts';
import { studentisedRangeUpperTail } from '../../numerics/studentised-range.ts';
import { adjustPValues } from '../core/adjust.ts';
import { AnalysisError, invalidPlan } from '../core/analysis-error.ts';
import { completeCells } from '../core/cells.ts';
import { onGrid, roundingGrid } from '../core/grid.ts';
import type { Method } from '../core/method.ts';
import { median } from '../core/moments.ts';
import type { Plan } from '../core/plan.ts';
import { midRanks } from '../core/ranks.ts';
import type { Row } from '../core/result.ts';
import { signedRankTest } from '../core/signed-rank-test.ts';

/** Friedman's test of k related samples with Kendall's W, the F form, and three kinds of pairwise comparison. */
export const friedman: Method = {
  name: 'friedman',
  run(plan, table) {
    const { levels, columns, dropped } = completeCells(plan, table, { requireLevels: threeLevels });
    const ranks = rankWithinSubjects(columns);
    const { n, k } = ranks;
    if (ranks.tieSum === n * (k ** 3 - k)) throw new AnalysisError('zero_variance');
    const chiSquare = friedmanStatistic(ranks);
    const kendall = chiSquare / (n * (k - 1));
    const denominator = n * (k - 1) - chiSquare;
    const f = denominator > 1e-9 * n ? ((n - 1) * chiSquare) / denominator : null;
    const df2 = (n - 1) * (k - 1);
    return {
      n,
      dropped,
      estimates: {
        chi_square: chiSquare,
        df: k - 1,
        p_value: chiSquareUpperTail(chiSquare, k - 1),
        kendall_w: kendall,
        iman_davenport_f: f,
        iman_davenport_df_1: k - 1,
        iman_davenport_df_2: df2,
        iman_davenport_p: f === null ? null : fUpperTail(f, k - 1, df2),
      },
      tables: {
        ranks: levels.map((level, j) => ({
          level,
          rank_sum: ranks.sums[j]!,
          mean_rank: ranks.sums[j]! / n,
          median: median(columns[j]!),
        })),
        pairwise_wilcoxon: wilcoxonPairs(plan, levels, columns),
        pairwise_nemenyi: nemenyiPairs(levels, ranks),
        pairwise_conover: conoverPairs(plan, levels, ranks),
      },
    };
  },
};

interface Ranks {
  n: number;
  k: number;
  /** Rank sum by level. */
  sums: number[];
  /** Sum of squared ranks. */
  squares: number;
  tieSum: number;
}

function threeLevels(levels: readonly string[]): void {
  if (levels.length < 3) throw invalidPlan('The method friedman compares at least 3 levels.');
}

/** Ranks of the values as they are: no grid, as nothing is subtracted. */
function rankWithinSubjects(columns: Float64Array[]): Ranks {
  const n = columns[0]!.length;
  const sums = columns.map(() => 0);
  let squares = 0;
  let tieSum = 0;
  for (let i = 0; i < n; i += 1) {
    const row = midRanks(columns.map((column) => column[i]!));
    tieSum += row.tieSum;
    row.ranks.forEach((rank, j) => {
      sums[j]! += rank;
      squares += rank ** 2;
    });
  }
  return { n, k: columns.length, sums, squares, tieSum };
}

function friedmanStatistic({ n, k, sums, tieSum }: Ranks): number {
  const expected = (n * (k + 1)) / 2;
  const spread = sums.reduce((sum, rankSum) => sum + (rankSum - expected) ** 2, 0);
  return (12 * spread) / (n * k * (k + 1) - tieSum / (k - 1));
}

function pairs(levels: readonly string[]): { i: number; j: number; level_1: string; level_2: string }[] {
  return levels.flatMap((level_1, i) =>
    levels.slice(i + 1).map((level_2, offset) => ({ i, j: i + 1 + offset, level_1, level_2 })),
  );
}

/** Signed-rank tests on the grid of all columns; null where no difference is non-zero. */
function wilcoxonPairs(plan: Plan, levels: readonly string[], columns: Float64Array[]): Row[] {
  const grid = roundingGrid(...columns);
  const rows = pairs(levels).map(({ i, j, level_1, level_2 }) => {
    const rounded = columns[i]!.map((x, subject) => onGrid(x - columns[j]![subject]!, grid));
    const test = signedRankTest(rounded, 'both');
    return {
      level_1,
      level_2,
      sum_positive_ranks: test?.sumOfPositiveRanks ?? null,
      exact: test === null ? null : test.exact ? 1 : 0,
      p_value: test?.pValue ?? null,
    };
  });
  return withAdjusted(rows, plan);
}

/** Nemenyi 1963, as in Hollander & Wolfe 1973, section 7.3: all pairs of mean ranks against the studentised range. */
function nemenyiPairs(levels: readonly string[], { n, k, sums }: Ranks): Row[] {
  const standardError = Math.sqrt((k * (k + 1)) / (6 * n));
  return pairs(levels).map(({ i, j, level_1, level_2 }) => {
    const mean_rank_difference = (sums[i]! - sums[j]!) / n;
    const q = (Math.SQRT2 * Math.abs(mean_rank_difference)) / standardError;
    return { level_1, level_2, mean_rank_difference, q, p_value: studentisedRangeUpperTail(q, k) };
  });
}

/** Conover 1999, Practical Nonparametric Statistics, section 5.8. */
function conoverPairs(plan: Plan, levels: readonly string[], { n, k, sums, squares }: Ranks): Row[] {
  const df = (n - 1) * (k - 1);
  const rest = squares - sums.reduce((sum, rankSum) => sum + rankSum ** 2, 0) / n;
  const varianceOfDifference = (2 * n * rest) / df;
  const rows = pairs(levels).map(({ i, j, level_1, level_2 }) => {
    const t = varianceOfDifference > 1e-9 ? (sums[i]! - sums[j]!) / Math.sqrt(varianceOfDifference) : null;
    return { level_1, level_2, t, df, p_value: t === null ? null : studentTTwoSided(t, df) };
  });
  return withAdjusted(rows, plan);
}

function withAdjusted<T extends Row & { p_value: number | null }>(rows: T[], { adjust }: Plan): Row[] {
  const adjusted = adjustPValues(
    rows.map((row) => row.p_value),
    adjust,
  );
  return rows.map((row, i) => ({ ...row, p_adjusted: adjusted[i]! }));
}
