import { innerProduct, multiply, times, traceOfProduct } from '../../numerics/linear-algebra.ts';
import type { CrossProducts } from './cross-products.ts';

/** Value, first and second derivatives (row-major 3 × 3) by the elements Φ₁₁, Φ₂₁, Φ₂₂ of Φ = ΛΛ'. */
export interface Expansion {
  value: number;
  gradient: Float64Array;
  hessian: Float64Array;
}

/** Pairs of elements of Φ in the order in which second derivatives are summed. */
export const PAIRS = [
  [0, 0],
  [0, 1],
  [0, 2],
  [1, 1],
  [1, 2],
  [2, 2],
] as const;

/** An `Expansion` of zero. */
export function emptyExpansion(): Expansion {
  return { value: 0, gradient: new Float64Array(3), hessian: new Float64Array(9) };
}

/** Adds `factor` times the values, one for each of `PAIRS`, to a symmetric 3 × 3 matrix. */
export function addSymmetric(hessian: Float64Array, factor: number, values: ArrayLike<number>): void {
  PAIRS.forEach(([i, j], index) => {
    hessian[3 * i + j]! += factor * values[index]!;
    if (i !== j) hessian[3 * j + i]! += factor * values[index]!;
  });
}

/**
 * Writes the derivatives of e'Se, e = (−coefficients, 1), into `residual`: the coefficients make it least, so
 * they move with the parameters. `first` and `second` are −∂S and half of ∂²S (packed, one for each of `PAIRS`).
 */
export function expandResidual(
  residual: Expansion,
  first: readonly CrossProducts[],
  second: readonly Float64Array[],
  coefficients: Float64Array,
  unscaledCovariance: Float64Array,
  p: number,
): void {
  const e = (i: number) => (i === p ? 1 : -coefficients[i]!);
  const weights = traceWeights(p + 1, (i, j) => e(i) * e(j));
  const scores = first.map(({ matrix, vector }) => {
    const fitted = times(matrix, p, coefficients);
    return vector.map((value, i) => value - fitted[i]!);
  });
  first.forEach(({ vector, corner }, i) => {
    residual.gradient[i] =
      innerProduct(vector, coefficients) + innerProduct(scores[i]!, coefficients) - corner;
  });
  const moved = scores.map((score) => times(unscaledCovariance, p, score));
  addSymmetric(
    residual.hessian,
    2,
    PAIRS.map(([i, j], index) => innerProduct(weights, second[index]!) - innerProduct(scores[i]!, moved[j]!)),
  );
}

/** Adds the derivatives of ln|X'V⁻¹X|; arguments as for `expandResidual`. */
export function expandLogDeterminant(
  logDeterminants: Expansion,
  first: readonly CrossProducts[],
  second: readonly Float64Array[],
  unscaledCovariance: Float64Array,
  p: number,
): void {
  const weights = traceWeights(p + 1, (i, j) => (i < p && j < p ? unscaledCovariance[i * p + j]! : 0));
  const moved = first.map(({ matrix }) => multiply(unscaledCovariance, matrix, p));
  moved.forEach((product, i) => {
    for (let d = 0; d < p; d += 1) logDeterminants.gradient[i]! -= product[d * p + d]!;
  });
  addSymmetric(
    logDeterminants.hessian,
    1,
    PAIRS.map(
      ([i, j], index) => 2 * innerProduct(weights, second[index]!) - traceOfProduct(moved[i]!, moved[j]!, p),
    ),
  );
}

/** A symmetric matrix packed so that its inner product with a packed matrix is the trace of their product. */
function traceWeights(size: number, element: (i: number, j: number) => number): Float64Array {
  const weights = new Float64Array((size * (size + 1)) / 2);
  for (let i = 0, e = 0; i < size; i += 1) {
    for (let j = 0; j <= i; j += 1, e += 1) weights[e] = (i === j ? 1 : 2) * element(i, j);
  }
  return weights;
}
