import { seededRandom } from '../../numerics/random.ts';
import { AnalysisError } from '../core/analysis-error.ts';
import type { Method } from '../core/method.ts';
import { mean } from '../core/moments.ts';
import { pairsOf } from '../core/paired-difference.ts';
import type { Direction } from '../core/t-test.ts';

/** Sign-flip permutation test of the sum of differences; Fisher 1935, The Design of Experiments, section 21. */
export const permutationPaired: Method = {
  name: 'permutation_paired',
  run(plan, table) {
    const { n, difference, rounded, dropped } = pairsOf(plan, table);
    if (rounded.every((d) => d === 0)) throw new AnalysisError('no_nonzero_differences');
    const exact = n <= 20;
    const total = exact ? 2 ** n : plan.resamples;
    const isExtreme = extremeness(rounded, plan.direction);
    const extreme = exact ? countAll(rounded, isExtreme) : countSampled(rounded, isExtreme, total, plan.seed);
    return {
      n,
      dropped,
      estimates: {
        mean_difference: mean(difference),
        p_value: exact ? extreme / total : (extreme + 1) / (total + 1),
        n_permutations: total,
        n_extreme: exact ? extreme : null,
        exact: exact ? 1 : 0,
      },
    };
  },
};

/** Whether a sum is at least as far out as the observed one; sums within 1e-12·Σ|d| count as equal. */
function extremeness(d: Float64Array, direction: Direction): (sum: number) => boolean {
  const observed = d.reduce((sum, value) => sum + value, 0);
  const tolerance = 1e-12 * d.reduce((sum, value) => sum + Math.abs(value), 0);
  if (direction === 'above') return (sum) => sum >= observed - tolerance;
  if (direction === 'below') return (sum) => sum <= observed + tolerance;
  const limit = Math.abs(observed) - tolerance;
  return (sum) => Math.abs(sum) >= limit;
}

/** All sign assignments: each difference doubles the list of sums. */
function countAll(d: Float64Array, isExtreme: (sum: number) => boolean): number {
  const sums = new Float64Array(2 ** d.length);
  let filled = 1;
  for (const value of d) {
    for (let k = 0; k < filled; k += 1) {
      sums[filled + k] = sums[k]! - value;
      sums[k] = sums[k]! + value;
    }
    filled *= 2;
  }
  let count = 0;
  for (const sum of sums) if (isExtreme(sum)) count += 1;
  return count;
}

function countSampled(
  d: Float64Array,
  isExtreme: (sum: number) => boolean,
  resamples: number,
  seed: number,
): number {
  const random = seededRandom(seed);
  let count = 0;
  for (let r = 0; r < resamples; r += 1) {
    let sum = 0;
    let signs = 0;
    for (let i = 0; i < d.length; i += 1) {
      if (i % 32 === 0) signs = random.bits();
      sum += signs & 1 ? d[i]! : -d[i]!;
      signs >>>= 1;
    }
    if (isExtreme(sum)) count += 1;
  }
  return count;
}
