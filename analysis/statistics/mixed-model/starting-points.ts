import type { FreeElements } from './profiled-deviance.ts';
import type { SubjectStatistics } from './subject-statistics.ts';

/** Sizes of the standard deviations of random effects over the residual one that are tried on small data. */
const SIZES = [0.1, 1, 10];
/** With more subjects the likelihood is close to quadratic, and one good start is enough. */
const MANY = 100;

/**
 * Points to start the search from: variances by moments first, then a coarse grid unless the subjects are
 * many.
 */
export function startingPoints(
  statistics: SubjectStatistics,
  free: FreeElements,
  coefficients: Float64Array,
): Float64Array[] {
  const byMoments = startByMoments(statistics, coefficients);
  const starts = [Float64Array.from(free, (element) => byMoments[element]!)];
  if (statistics.subjects > MANY) return starts;
  const grids = free.map((element) => (element === 1 ? [0] : SIZES));
  const grid = grids.reduce<number[][]>(
    (points, sizes) => points.flatMap((point) => sizes.map((size) => [...point, size])),
    [[]],
  );
  return [...starts, ...grid.map((point) => Float64Array.from(point))];
}

/**
 * Λ from the moments of least-squares residuals: the second moments of Q'r have expectation
 * σ²(I + R Φ R') for each subject, the rest of the residuals σ². Variances are kept away from zero.
 */
function startByMoments(statistics: SubjectStatistics, coefficients: Float64Array): number[] {
  const { within, moments, packed, patterns, counts, r11, r12, r22 } = statistics;
  const weights = residualWeights(coefficients);
  const freedom = Math.max(1, statistics.rows - statistics.spanned - statistics.columns);
  const variance = weighted(within, 0, weights) / freedom;
  const moment = (pattern: number, part: number) =>
    weighted(moments, (3 * pattern + part) * packed, weights) / variance;
  let [above, below] = [0, 0];
  for (let g = 0; g < patterns; g += 1) {
    above += moment(g, 2) - counts[g]!;
    below += counts[g]! * r22[g]! ** 2;
  }
  const slope = below > 0 ? Math.max(above / below, 1e-4) : 0;
  [above, below] = [0, 0];
  for (let g = 0; g < patterns; g += 1) {
    above += moment(g, 1) / 2 - counts[g]! * r22[g]! * r12[g]! * slope;
    below += counts[g]! * r22[g]! * r11[g]!;
  }
  const covariance = below > 0 ? above / below : 0;
  [above, below] = [0, 0];
  for (let g = 0; g < patterns; g += 1) {
    const known = 1 + 2 * r11[g]! * r12[g]! * covariance + r12[g]! ** 2 * slope;
    above += moment(g, 0) - counts[g]! * known;
    below += counts[g]! * r11[g]! ** 2;
  }
  const intercept = Math.max(above / below, 1e-4);
  const limit = 0.9 * Math.sqrt(intercept * slope);
  const l11 = Math.sqrt(intercept);
  const l21 = Math.max(-limit, Math.min(limit, covariance)) / l11;
  return [l11, l21, Math.sqrt(Math.max(slope - l21 * l21, 1e-4))];
}

/** Weights that turn a packed cross-product of [X y] into that of the residual y − Xb. */
function residualWeights(coefficients: Float64Array): Float64Array {
  const e = [...coefficients.map((b) => -b), 1];
  return Float64Array.from(
    e.flatMap((value, i) => e.slice(0, i + 1).map((other, j) => (i === j ? 1 : 2) * value * other)),
  );
}

function weighted(values: Float64Array, offset: number, weights: Float64Array): number {
  let sum = 0;
  for (let e = 0; e < weights.length; e += 1) sum += weights[e]! * values[offset + e]!;
  return sum;
}
