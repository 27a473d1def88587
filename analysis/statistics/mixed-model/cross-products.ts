/** A cross-product of [X y] by its blocks: X'X (row-major), X'y and y'y. */
export interface CrossProducts {
  readonly matrix: Float64Array;
  readonly vector: Float64Array;
  readonly corner: number;
}

/** Unpacks the lower triangle of a cross-product whose last row is the outcome's. */
export function unpack(packed: Float64Array, p: number): CrossProducts {
  const matrix = new Float64Array(p * p);
  let element = 0;
  for (let i = 0; i < p; i += 1) {
    for (let j = 0; j <= i; j += 1) {
      matrix[i * p + j] = packed[element]!;
      matrix[j * p + i] = packed[element]!;
      element += 1;
    }
  }
  return { matrix, vector: packed.slice(element, element + p), corner: packed[element + p]! };
}

/** Solution of normal equations; dependent columns have the coefficient zero and do not count in `rank`. */
export interface PlainFit {
  readonly coefficients: Float64Array;
  readonly rank: number;
  /** What the columns leave of y'y. */
  readonly sumOfSquares: number;
}

/** A column counts as dependent on others when less than this part of its sum of squares is left. */
const DEPENDENT = 1e-11;

/** Least squares from cross-products by elimination; `squares` are the sums of squares that columns are judged by. */
export function solveNormalEquations(cross: CrossProducts, squares: (column: number) => number): PlainFit {
  const p = cross.vector.length;
  const matrix = Float64Array.from(cross.matrix);
  const vector = Float64Array.from(cross.vector);
  const coefficients = new Float64Array(p);
  const kept: number[] = [];
  let sumOfSquares = cross.corner;
  for (let j = 0; j < p; j += 1) {
    const pivot = matrix[j * p + j]!;
    if (!(pivot > DEPENDENT * squares(j))) continue;
    kept.push(j);
    for (let i = j + 1; i < p; i += 1) {
      const factor = matrix[j * p + i]! / pivot;
      for (let k = i; k < p; k += 1) matrix[i * p + k]! -= factor * matrix[j * p + k]!;
      vector[i]! -= factor * vector[j]!;
    }
    sumOfSquares -= vector[j]! ** 2 / pivot;
  }
  for (const j of kept.toReversed()) {
    let sum = vector[j]!;
    for (const k of kept) if (k > j) sum -= matrix[j * p + k]! * coefficients[k]!;
    coefficients[j] = sum / matrix[j * p + j]!;
  }
  return { coefficients, rank: kept.length, sumOfSquares };
}
