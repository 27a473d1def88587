import { studentTQuantile } from '../../numerics/student-t.ts';
import type { Method } from '../core/method.ts';
import { mean, variance } from '../core/moments.ts';
import { varyingPairsOf } from '../core/paired-difference.ts';
import { required } from '../core/plan.ts';
import { tTest } from '../core/t-test.ts';

/** How the mean difference moves when the incomplete subjects differ from the complete ones by δ, and where it tips. */
export const pairedDeltaAdjusted: Method = {
  name: 'paired_delta_adjusted',
  run(plan, table) {
    const { deltas } = required(plan, 'deltas');
    const { n, difference, dropped } = varyingPairsOf(plan, table);
    const all = n + dropped.length;
    const fraction = dropped.length / all;
    const meanDifference = mean(difference);
    const spread = variance(difference);
    const shiftVariance = (fraction * (1 - fraction)) / all;
    const rows = deltas.map((delta) => {
      const estimate = meanDifference + delta * fraction;
      const standard_error = Math.sqrt(spread / n + delta ** 2 * shiftVariance);
      return { delta, estimate, standard_error, ...tTest(estimate, standard_error, n - 1, plan) };
    });
    const t = -studentTQuantile((1 - plan.confidence) / 2, n - 1);
    return {
      n: all,
      estimates: {
        n_complete: n,
        n_incomplete: dropped.length,
        fraction_incomplete: fraction,
        mean_difference: meanDifference,
        sd_difference: Math.sqrt(spread),
        tipping_delta: tippingPoint(
          realRoots(
            fraction ** 2 - t ** 2 * shiftVariance,
            2 * meanDifference * fraction,
            meanDifference ** 2 - (t ** 2 * spread) / n,
          ),
          deltas,
        ),
      },
      tables: { deltas: rows },
    };
  },
};

/** The root nearest to 0 within the range of the deltas; of two equally near, the positive one. */
function tippingPoint(roots: number[], deltas: readonly number[]): number | null {
  const [low, high] = [Math.min(...deltas), Math.max(...deltas)];
  const inside = roots.filter((root) => root >= low && root <= high);
  return inside.toSorted((a, b) => Math.abs(a) - Math.abs(b) || b - a)[0] ?? null;
}

/** Real roots of ax² + bx + c where the sign changes; the larger first, without cancellation. */
function realRoots(a: number, b: number, c: number): number[] {
  const discriminant = b ** 2 - 4 * a * c;
  if (!(discriminant > 0)) return [];
  const half = -(b + (b < 0 ? -1 : 1) * Math.sqrt(discriminant)) / 2;
  return [half / a, c / half].filter(Number.isFinite);
}
