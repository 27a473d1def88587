import { normalQuantile } from '../../numerics/normal.ts';
import { signedRankCdf, signedRankQuantile } from '../../numerics/signed-rank.ts';
import { AnalysisError } from '../core/analysis-error.ts';
import { onGrid } from '../core/grid.ts';
import type { Method } from '../core/method.ts';
import { median } from '../core/moments.ts';
import { orderStatistic } from '../core/order-statistics.ts';
import { pairsOf } from '../core/paired-difference.ts';
import { warning } from '../core/result.ts';
import { signedRankTest, type SignedRankTest } from '../core/signed-rank-test.ts';
import type { Direction } from '../core/t-test.ts';

/** Wilcoxon's signed-rank test with the Hodges–Lehmann estimate and its interval from the Walsh averages. */
export const wilcoxonSignedRank: Method = {
  name: 'wilcoxon_signed_rank',
  run(plan, table) {
    const { n, rounded, grid, dropped } = pairsOf(plan, table, { least: 1 });
    const { direction, confidence, null_value: nullValue } = plan;
    const shifted = nullValue === 0 ? rounded : rounded.map((d) => onGrid(d - nullValue, grid));
    const test = signedRankTest(shifted, direction);
    if (test === null) throw new AnalysisError('no_nonzero_differences');
    const walsh = walshAverages(shifted.filter((d) => d !== 0));
    const bounds = intervalRank(test, confidence, direction);
    const total = walsh.length;
    return {
      n,
      dropped,
      estimates: {
        sum_positive_ranks: test.sumOfPositiveRanks,
        n_nonzero: test.n,
        n_zero: test.zeros,
        exact: test.exact ? 1 : 0,
        z: test.z,
        p_value: test.pValue,
        median_difference: median(rounded),
        pseudomedian: medianOf(walsh) + nullValue,
        ci_lower: direction === 'below' ? null : orderStatistic(walsh, bounds.rank) + nullValue,
        ci_upper: direction === 'above' ? null : orderStatistic(walsh, total + 1 - bounds.rank) + nullValue,
        achieved_confidence: bounds.achieved,
        rank_biserial: (2 * test.sumOfPositiveRanks - total) / total,
      },
      warnings: [
        ...(test.zeros > 0 ? [warning('zero_differences')] : []),
        ...(test.exact ? [] : [warning('normal_approximation')]),
      ],
    };
  },
};

/** (dᵢ + dⱼ)/2 for all i ≤ j: n(n + 1)/2 of them. */
function walshAverages(d: Float64Array): Float64Array {
  const averages = new Float64Array((d.length * (d.length + 1)) / 2);
  let at = 0;
  for (let i = 0; i < d.length; i += 1) {
    for (let j = i; j < d.length; j += 1, at += 1) averages[at] = (d[i]! + d[j]!) / 2;
  }
  return averages;
}

function medianOf(values: Float64Array): number {
  const half = (values.length + 1) / 2;
  const low = orderStatistic(values, Math.floor(half));
  return Number.isInteger(half) ? low : (low + orderStatistic(values, Math.ceil(half))) / 2;
}

/** Which Walsh average from either end bounds the interval, and what confidence that attains (exact test only). */
function intervalRank(
  { n, exact, sigma }: SignedRankTest,
  confidence: number,
  direction: Direction,
): { rank: number; achieved: number | null } {
  const sides = direction === 'both' ? 2 : 1;
  const tail = (1 - confidence) / sides;
  if (exact) {
    const rank = Math.max(1, signedRankQuantile(tail, n));
    return { rank, achieved: 1 - sides * signedRankCdf(rank - 1, n) };
  }
  const total = (n * (n + 1)) / 2;
  const rank = Math.floor(total / 2 + 0.5 + normalQuantile(tail) * sigma);
  return { rank: Math.min(Math.max(1, rank), total), achieved: null };
}
