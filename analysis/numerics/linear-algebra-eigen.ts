/** Eigenvalues in falling order; `vectors[i]` is the unit eigenvector of `values[i]`. */
export interface SymmetricEigen {
  readonly values: number[];
  readonly vectors: Float64Array[];
}

const MAXIMUM_SWEEPS = 40;

/**
 * Eigenvalues and eigenvectors of a symmetric matrix by cyclic Jacobi rotations.
 *
 * Shape   row-major n × n, n up to a few dozen: accurate to the last digits, but of order n³ per sweep
 * Source  Golub and Van Loan 2013, Matrix Computations, section 8.5
 */
export function symmetricEigen(matrix: Float64Array, n: number): SymmetricEigen {
  const a = Float64Array.from(matrix);
  const v = new Float64Array(n * n);
  for (let i = 0; i < n; i += 1) v[i * n + i] = 1;
  for (let sweep = 0; sweep < MAXIMUM_SWEEPS; sweep += 1) {
    let rotated = false;
    for (let p = 0; p < n; p += 1) {
      for (let q = p + 1; q < n; q += 1) rotated = rotate(a, v, n, p, q) || rotated;
    }
    if (!rotated) break;
  }
  const order = Array.from({ length: n }, (_, i) => i).sort((i, j) => a[j * n + j]! - a[i * n + i]!);
  return {
    values: order.map((i) => a[i * n + i]!),
    vectors: order.map((i) => Float64Array.from({ length: n }, (_, row) => v[row * n + i]!)),
  };
}

/** Makes the element (p, q) zero; false when it already is negligible beside its diagonal. */
function rotate(a: Float64Array, v: Float64Array, n: number, p: number, q: number): boolean {
  const off = a[p * n + q]!;
  const app = a[p * n + p]!;
  const aqq = a[q * n + q]!;
  if (Math.abs(off) <= 1e-17 * Math.sqrt(Math.abs(app * aqq))) return false;
  const tau = (aqq - app) / (2 * off);
  const t =
    Math.abs(tau) > 1e150 ? 1 / (2 * tau) : (tau < 0 ? -1 : 1) / (Math.abs(tau) + Math.sqrt(1 + tau * tau));
  const cosine = 1 / Math.sqrt(1 + t * t);
  const sine = t * cosine;
  for (let k = 0; k < n; k += 1) turn(a, k * n + p, k * n + q, cosine, sine);
  for (let k = 0; k < n; k += 1) turn(a, p * n + k, q * n + k, cosine, sine);
  for (let k = 0; k < n; k += 1) turn(v, k * n + p, k * n + q, cosine, sine);
  a[p * n + q] = 0;
  a[q * n + p] = 0;
  return true;
}

function turn(a: Float64Array, first: number, second: number, cosine: number, sine: number): void {
  const x = a[first]!;
  const y = a[second]!;
  a[first] = cosine * x - sine * y;
  a[second] = sine * x + cosine * y;
}
