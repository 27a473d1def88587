import { unpack } from './cross-products.ts';
import type { FreeElements } from './profiled-deviance.ts';
import { emptyPatternCovariance, patternCovariance, type RelativeFactor } from './relative-covariance.ts';
import type { SubjectStatistics } from './subject-statistics.ts';
import { weightedMoments } from './weighted-moments.ts';

/** Products of the components G_i of V = Σ θ_iG_i with V⁻¹, in units of the residual variance. */
export interface VarianceComponents {
  /** Number of components: the elements of the random-effects covariance, then the residual. */
  readonly size: number;
  /** tr(V⁻¹G_iV⁻¹G_j), row-major. */
  readonly traces: Float64Array;
  /** X'V⁻¹G_iV⁻¹X. */
  readonly first: readonly Float64Array[];
  /** Symmetric part of X'V⁻¹G_iV⁻¹G_jV⁻¹X, row-major in (i, j). */
  readonly second: readonly Float64Array[];
}

/** A 2 × 2 matrix by rows. */
type Pair = readonly [number, number, number, number];

/**
 * Sums over subjects of the products that Kenward and Roger's method needs.
 *
 * Within the space of a subject's random effects G_i is D_i (see `likelihoodParts`) and V⁻¹ is K⁻¹; the residual's
 * G is the identity there and outside, where the others vanish.
 */
export function varianceComponents(
  statistics: SubjectStatistics,
  factor: RelativeFactor,
  elements: FreeElements,
): VarianceComponents {
  const p = statistics.columns;
  const size = elements.length + 1;
  const traces = new Float64Array(size * size);
  const k = emptyPatternCovariance();
  const sums = weightedMoments(statistics, size + size * size, (pattern, weights) => {
    patternCovariance(statistics, pattern, factor, k);
    const [a, b, c] = k.inverse;
    const inverse: Pair = [a, b, b, c];
    const d = [...elements.map((element) => derivative(statistics, pattern, element)), IDENTITY];
    const moved = d.map((matrix) => product(inverse, matrix));
    const outer = moved.map((matrix) => product(matrix, inverse));
    outer.forEach((matrix, i) => writeWeights(weights, i, matrix));
    moved.forEach((left, i) =>
      outer.forEach((right, j) => {
        const both = product(left, right);
        writeWeights(weights, size + i * size + j, both);
        traces[i * size + j]! += statistics.counts[pattern]! * trace(product(left, moved[j]!));
      }),
    );
  });
  const last = size - 1;
  traces[last * size + last]! += statistics.rows - 2 * statistics.subjects;
  const { packed, within } = statistics;
  for (const slot of [last, size + last * size + last]) {
    for (let e = 0; e < packed; e += 1) sums[slot * packed + e]! += within[e]!;
  }
  const block = (slot: number) => unpack(sums.subarray(slot * packed, (slot + 1) * packed), p).matrix;
  return {
    size,
    traces,
    first: Array.from({ length: size }, (_, i) => block(i)),
    second: Array.from({ length: size * size }, (_, ij) => block(size + ij)),
  };
}

const IDENTITY: Pair = [1, 0, 0, 1];

/** ∂K/∂Φ for an element of Φ: products of the columns (r₁₁, 0) and (r₁₂, r₂₂) of R. */
function derivative(
  { r11: R11, r12: R12, r22: R22 }: SubjectStatistics,
  pattern: number,
  element: 0 | 1 | 2,
): Pair {
  const r11 = R11[pattern]!;
  const r12 = R12[pattern]!;
  const r22 = R22[pattern]!;
  if (element === 0) return [r11 * r11, 0, 0, 0];
  if (element === 1) return [2 * r11 * r12, r11 * r22, r11 * r22, 0];
  return [r12 * r12, r12 * r22, r12 * r22, r22 * r22];
}

function product(x: Pair, y: Pair): Pair {
  return [
    x[0] * y[0] + x[1] * y[2],
    x[0] * y[1] + x[1] * y[3],
    x[2] * y[0] + x[3] * y[2],
    x[2] * y[1] + x[3] * y[3],
  ];
}

function trace(x: Pair): number {
  return x[0] + x[3];
}

function writeWeights(weights: Float64Array, slot: number, matrix: Pair): void {
  weights[3 * slot] = matrix[0];
  weights[3 * slot + 1] = 0.5 * (matrix[1] + matrix[2]);
  weights[3 * slot + 2] = matrix[3];
}
