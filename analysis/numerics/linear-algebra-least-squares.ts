/** A least-squares fit; columns that depend on earlier ones have no coefficient and do not count in `rank`. */
export interface LeastSquaresFit {
  readonly rank: number;
  /** null for a dependent column. */
  readonly coefficients: (number | null)[];
  /** (X'X)⁻¹ over all columns, row-major; zero in the rows and columns of dependent ones. */
  readonly unscaledCovariance: Float64Array;
  readonly residualSumOfSquares: number;
  /** Part of the sum of squares of y that each column adds to the columns before it. */
  readonly sequentialSumsOfSquares: number[];
}

const DEPENDENT = 1e-7;

/**
 * Least squares by Gram-Schmidt with a second pass, in the order of the columns.
 *
 * The second pass keeps the columns orthogonal to rounding (Björck 1996, Numerical Methods for Least Squares
 * Problems, section 2.4), so sums of squares are sums of squares and never differences of larger numbers.
 *
 * Shape   columns of equal length n, y of length n; centre covariates first when an intercept is among the columns
 * Domain  finite values. A column is dependent when less than 1e-7 of its length is left
 */
export function leastSquares(columns: readonly Float64Array[], y: Float64Array): LeastSquaresFit {
  const p = columns.length;
  const basis: (Float64Array | null)[] = [];
  const r = new Float64Array(p * p);
  const effects = new Float64Array(p);
  const residual = Float64Array.from(y);
  columns.forEach((column, j) => {
    const q = Float64Array.from(column);
    const length = norm(q);
    for (let pass = 0; pass < 2; pass += 1) {
      basis.forEach((b, i) => {
        if (b !== null) r[i * p + j]! += removeDirection(q, b);
      });
    }
    const left = norm(q);
    if (!(left > DEPENDENT * length)) {
      basis.push(null);
      return;
    }
    for (let k = 0; k < q.length; k += 1) q[k]! /= left;
    r[j * p + j] = left;
    basis.push(q);
    effects[j] = removeDirection(residual, q);
  });
  basis.forEach((q, j) => {
    if (q !== null) effects[j]! += removeDirection(residual, q);
  });
  const kept = basis.flatMap((q, j) => (q === null ? [] : [j]));
  const inverse = invertUpper(r, p, kept);
  return {
    rank: kept.length,
    coefficients: columns.map((_, i) =>
      basis[i] === null ? null : kept.reduce((sum, j) => sum + inverse[i * p + j]! * effects[j]!, 0),
    ),
    unscaledCovariance: outerSquare(inverse, p, kept),
    residualSumOfSquares: norm(residual) ** 2,
    sequentialSumsOfSquares: Array.from(effects, (effect) => effect * effect),
  };
}

function norm(x: Float64Array): number {
  let sum = 0;
  for (const value of x) sum += value * value;
  return Math.sqrt(sum);
}

/** Takes the part along the unit vector `direction` out of x and returns its length. */
function removeDirection(x: Float64Array, direction: Float64Array): number {
  let along = 0;
  for (let k = 0; k < x.length; k += 1) along += x[k]! * direction[k]!;
  for (let k = 0; k < x.length; k += 1) x[k]! -= along * direction[k]!;
  return along;
}

function invertUpper(r: Float64Array, p: number, kept: readonly number[]): Float64Array {
  const inverse = new Float64Array(p * p);
  for (const j of kept) {
    inverse[j * p + j] = 1 / r[j * p + j]!;
    for (const i of kept.filter((k) => k < j).reverse()) {
      let sum = 0;
      for (const k of kept) if (k > i && k <= j) sum += r[i * p + k]! * inverse[k * p + j]!;
      inverse[i * p + j] = -sum / r[i * p + i]!;
    }
  }
  return inverse;
}

function outerSquare(inverse: Float64Array, p: number, kept: readonly number[]): Float64Array {
  const product = new Float64Array(p * p);
  for (const i of kept) {
    for (const j of kept) {
      for (const k of kept) product[i * p + j]! += inverse[i * p + k]! * inverse[j * p + k]!;
    }
  }
  return product;
}
