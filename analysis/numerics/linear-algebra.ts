/**
 * Dense linear algebra for small symmetric matrices (tens of rows): the sizes that a fixed part or a
 * covariance of estimates has. Square matrices are row-major `Float64Array`s of length n².
 *
 * Source  Golub and Van Loan 2013, Matrix Computations, sections 4.2 (Cholesky) and 8.5 (Jacobi)
 */

/**
 * Lower Cholesky factor L with A = LL', or the index of the first column that depends on earlier ones.
 *
 * A column counts as dependent when what is left of its diagonal is at most `tolerance` times the diagonal.
 */
export function choleskyFactor(a: Float64Array, n: number, tolerance = 0): Float64Array | number {
  const l = new Float64Array(n * n);
  for (let j = 0; j < n; j += 1) {
    const diagonal = a[j * n + j]!;
    let left = diagonal;
    for (let k = 0; k < j; k += 1) left -= l[j * n + k]! ** 2;
    if (!(left > tolerance * diagonal)) return j;
    const root = Math.sqrt(left);
    l[j * n + j] = root;
    for (let i = j + 1; i < n; i += 1) {
      let sum = a[i * n + j]!;
      for (let k = 0; k < j; k += 1) sum -= l[i * n + k]! * l[j * n + k]!;
      l[i * n + j] = sum / root;
    }
  }
  return l;
}

/** Solves LL'x = b for a lower Cholesky factor L. */
export function choleskySolve(l: Float64Array, n: number, b: Float64Array): Float64Array {
  const x = Float64Array.from(b);
  for (let i = 0; i < n; i += 1) {
    let sum = x[i]!;
    for (let k = 0; k < i; k += 1) sum -= l[i * n + k]! * x[k]!;
    x[i] = sum / l[i * n + i]!;
  }
  for (let i = n - 1; i >= 0; i -= 1) {
    let sum = x[i]!;
    for (let k = i + 1; k < n; k += 1) sum -= l[k * n + i]! * x[k]!;
    x[i] = sum / l[i * n + i]!;
  }
  return x;
}

/** The inverse (LL')⁻¹ for a lower Cholesky factor L, exactly symmetric. */
export function choleskyInverse(l: Float64Array, n: number): Float64Array {
  const inverse = new Float64Array(n * n);
  for (let j = 0; j < n; j += 1) {
    const unit = new Float64Array(n);
    unit[j] = 1;
    const column = choleskySolve(l, n, unit);
    for (let i = j; i < n; i += 1) {
      inverse[i * n + j] = column[i]!;
      inverse[j * n + i] = column[i]!;
    }
  }
  return inverse;
}

/** ln|LL'| for a lower Cholesky factor L. */
export function choleskyLogDeterminant(l: Float64Array, n: number): number {
  let sum = 0;
  for (let i = 0; i < n; i += 1) sum += Math.log(l[i * n + i]!);
  return 2 * sum;
}

/** The product A x of an n × n matrix and a vector. */
export function times(a: Float64Array, n: number, x: ArrayLike<number>): Float64Array {
  const product = new Float64Array(n);
  for (let i = 0; i < n; i += 1) {
    let sum = 0;
    for (let j = 0; j < n; j += 1) sum += a[i * n + j]! * x[j]!;
    product[i] = sum;
  }
  return product;
}

/** The product AB of two n × n matrices. */
export function multiply(a: Float64Array, b: Float64Array, n: number): Float64Array {
  const product = new Float64Array(n * n);
  for (let i = 0; i < n; i += 1) {
    for (let k = 0; k < n; k += 1) {
      const factor = a[i * n + k]!;
      if (factor === 0) continue;
      for (let j = 0; j < n; j += 1) product[i * n + j]! += factor * b[k * n + j]!;
    }
  }
  return product;
}

/** The sum of products of corresponding elements: x'y, or tr(A'B) for matrices. */
export function innerProduct(x: ArrayLike<number>, y: ArrayLike<number>): number {
  let sum = 0;
  for (let i = 0; i < x.length; i += 1) sum += x[i]! * y[i]!;
  return sum;
}

/** The bilinear form x'Ay. */
export function bilinearForm(a: Float64Array, n: number, x: ArrayLike<number>, y: ArrayLike<number>): number {
  return innerProduct(x, times(a, n, y));
}

/** tr(AB) for n × n matrices. */
export function traceOfProduct(a: Float64Array, b: Float64Array, n: number): number {
  let sum = 0;
  for (let i = 0; i < n; i += 1) for (let j = 0; j < n; j += 1) sum += a[i * n + j]! * b[j * n + i]!;
  return sum;
}
