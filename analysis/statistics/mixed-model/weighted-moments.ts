import type { SubjectStatistics } from './subject-statistics.ts';

/**
 * Sums of Q'[X y]-moments over patterns: for each slot Σ w₁M₁₁ + w₂(M₁₂ + M₂₁) + w₃M₂₂, packed.
 *
 * `weigh` writes the three weights of each slot for one pattern, slot by slot; a symmetric 2 × 2 matrix
 * (a, b; b, c) gives the weights a, b, c. Every quantity of the likelihood is such a sum: this is the one hot loop.
 */
export function weightedMoments(
  statistics: SubjectStatistics,
  slots: number,
  weigh: (pattern: number, weights: Float64Array) => void,
): Float64Array {
  const { packed, moments, patterns } = statistics;
  const sums = new Float64Array(slots * packed);
  const weights = new Float64Array(3 * slots);
  for (let pattern = 0; pattern < patterns; pattern += 1) {
    weigh(pattern, weights);
    const base = 3 * packed * pattern;
    for (let element = 0; element < packed; element += 1) {
      const first = moments[base + element]!;
      const cross = moments[base + packed + element]!;
      const second = moments[base + 2 * packed + element]!;
      let target = element;
      for (let w = 0; w < 3 * slots; w += 3) {
        sums[target]! += weights[w]! * first + weights[w + 1]! * cross + weights[w + 2]! * second;
        target += packed;
      }
    }
  }
  return sums;
}
