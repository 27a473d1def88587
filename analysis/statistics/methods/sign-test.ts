import { fairBinomialCdf, proportionLowerBound, proportionUpperBound } from '../../numerics/binomial.ts';
import { AnalysisError } from '../core/analysis-error.ts';
import { gridSteps } from '../core/grid.ts';
import type { Method } from '../core/method.ts';
import { median } from '../core/moments.ts';
import { pairsOf } from '../core/paired-difference.ts';
import { warning } from '../core/result.ts';

/** Sign test, interval of the median difference from order statistics, and the proportion of positive differences. */
export const signTest: Method = {
  name: 'sign_test',
  run(plan, table) {
    const { n, rounded, grid, dropped } = pairsOf(plan, table, { least: 1 });
    const { direction, confidence, null_value: nullValue } = plan;
    const signs = rounded.map((d) => Math.sign(gridSteps(d - nullValue, grid)));
    const positive = signs.filter((sign) => sign > 0).length;
    const negative = signs.filter((sign) => sign < 0).length;
    const nonZero = positive + negative;
    if (nonZero === 0) throw new AnalysisError('no_nonzero_differences');
    const sides = direction === 'both' ? 2 : 1;
    const tail = (1 - confidence) / sides;
    const rank = intervalRank(n, tail);
    const sorted = rounded.toSorted();
    const attainable = rank > 0;
    return {
      n,
      dropped,
      estimates: {
        n_positive: positive,
        n_negative: negative,
        n_zero: n - nonZero,
        p_value: {
          both: () => Math.min(1, 2 * fairBinomialCdf(Math.min(positive, negative), nonZero)),
          above: () => fairBinomialCdf(negative, nonZero),
          below: () => fairBinomialCdf(positive, nonZero),
        }[direction](),
        median_difference: median(rounded),
        ci_lower: attainable && direction !== 'below' ? sorted[rank - 1]! : null,
        ci_upper: attainable && direction !== 'above' ? sorted[n - rank]! : null,
        achieved_confidence: attainable ? 1 - sides * fairBinomialCdf(rank - 1, n) : null,
        proportion_positive: positive / nonZero,
        proportion_ci_lower: direction === 'below' ? 0 : proportionLowerBound(positive, nonZero, tail),
        proportion_ci_upper: direction === 'above' ? 1 : proportionUpperBound(positive, nonZero, tail),
      },
      warnings: [
        ...(n > nonZero ? [warning('zero_differences')] : []),
        ...(attainable ? [] : [warning('confidence_not_attainable')]),
      ],
    };
  },
};

/** Largest k with P(B(n, ½) ≤ k − 1) at most the tail; 0 if there is none. */
function intervalRank(n: number, tail: number): number {
  let k = 0;
  while (fairBinomialCdf(k, n) <= tail) k += 1;
  return k;
}
