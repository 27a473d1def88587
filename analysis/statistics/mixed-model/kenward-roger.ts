import {
  bilinearForm,
  choleskyFactor,
  choleskyInverse,
  innerProduct,
  multiply,
  times,
  traceOfProduct,
} from '../../numerics/linear-algebra.ts';
import type { MixedModelFit } from './fit.ts';
import type { FixedPartInference } from './fixed-part-inference.ts';
import { varianceComponents, type VarianceComponents } from './variance-components.ts';

/**
 * Kenward and Roger's adjusted covariance and degrees of freedom.
 *
 * All quantities are in units of the residual variance, which cancels: P_i = X'V⁻¹G_iV⁻¹X, Q_ij = X'V⁻¹G_iV⁻¹G_jV⁻¹X
 * for the components G_i of V, W the inverse of their expected information, C = (X'V⁻¹X)⁻¹,
 * C_A = C + 2C[Σ W_ij(Q_ij − P_iCP_j)]C.
 *
 * Domain  fits by REML
 * Source  Kenward and Roger 1997, Biometrics 53:983-997; Halekoh and Højsgaard 2014, J Stat Softw 59(9)
 *         (limits where the formulas are 0/0)
 */
export function kenwardRoger(fit: MixedModelFit): FixedPartInference {
  const p = fit.coefficients.length;
  const c = fit.parts.unscaledCovariance;
  const components = varianceComponents(fit.statistics, fit.factor, fit.elements);
  const w = inverseInformation(components, c, p);
  const adjusted = adjustedCovariance(components, w, c, p).map((value) => value * fit.residualVariance);
  const moves = components.first.map((block) => multiply(multiply(c, block, p), c, p));
  return {
    contrast: (weights) => ({
      estimate: innerProduct(weights, fit.coefficients),
      standardError: Math.sqrt(bilinearForm(adjusted, p, weights, weights)),
      df: scaling([weights], c, moves, w).df,
    }),
    test: (rows) => {
      const q = rows.length;
      const inverse = inverseOf(products(rows, adjusted, p), q);
      const values = rows.map((row) => innerProduct(row, fit.coefficients));
      const { df, lambda } = scaling(rows, c, moves, w);
      return { f: (lambda * bilinearForm(inverse, q, values, values)) / q, df1: q, df2: df };
    },
  };
}

/** Inverse of ½[tr(V⁻¹G_iV⁻¹G_j) − 2tr(CQ_ij) + tr(CP_iCP_j)]. */
function inverseInformation({ size, traces, first, second }: VarianceComponents, c: Float64Array, p: number) {
  const moved = first.map((block) => multiply(c, block, p));
  const information = new Float64Array(size * size);
  for (let i = 0; i < size; i += 1) {
    for (let j = 0; j < size; j += 1) {
      const k = i * size + j;
      information[k] =
        0.5 * (traces[k]! - 2 * traceOfProduct(c, second[k]!, p) + traceOfProduct(moved[i]!, moved[j]!, p));
    }
  }
  return inverseOf(information, size);
}

function adjustedCovariance(
  { size, first, second }: VarianceComponents,
  w: Float64Array,
  c: Float64Array,
  p: number,
): Float64Array {
  const sum = new Float64Array(p * p);
  for (let i = 0; i < size; i += 1) {
    const left = multiply(first[i]!, c, p);
    for (let j = 0; j < size; j += 1) {
      const k = i * size + j;
      const product = multiply(left, first[j]!, p);
      second[k]!.forEach((value, e) => (sum[e]! += w[k]! * (value - product[e]!)));
    }
  }
  const correction = multiply(multiply(c, sum, p), c, p);
  return c.map((value, e) => value + 2 * correction[e]!);
}

/** Denominator df and factor of the F statistic of the rows; `moves` are CP_iC. */
function scaling(
  rows: readonly Float64Array[],
  c: Float64Array,
  moves: readonly Float64Array[],
  w: Float64Array,
): { df: number; lambda: number } {
  const q = rows.length;
  const p = rows[0]!.length;
  const inverse = inverseOf(products(rows, c, p), q);
  const effects = moves.map((move) => multiply(inverse, products(rows, move, p), q));
  const traces = effects.map((effect) =>
    effect.reduce((sum, value, k) => (k % (q + 1) === 0 ? sum + value : sum), 0),
  );
  let a1 = 0;
  let a2 = 0;
  effects.forEach((first, i) =>
    effects.forEach((second, j) => {
      const weight = w[i * effects.length + j]!;
      a1 += weight * traces[i]! * traces[j]!;
      a2 += weight * traceOfProduct(first, second, q);
    }),
  );
  const b = (a1 + 6 * a2) / (2 * q);
  const h = ((q + 1) * a1 - (q + 4) * a2) / ((q + 2) * a2);
  const d = 3 * q + 2 * (1 - h);
  const v0 = 1 + (h / d) * b;
  const v1 = 1 - ((q - h) / d) * b;
  const v2 = 1 - ((q + 2 - h) / d) * b;
  const shrink = 1 - a2 / q;
  const rho = (ratio(shrink, v1) ** 2 * (Math.abs(v0) < 1e-10 ? 0 : v0)) / v2 / q;
  const df = 4 + (q + 2) / (q * rho - 1);
  return { df, lambda: Math.abs(df - 2) < 0.01 ? 1 : (df * shrink) / (df - 2) };
}

function ratio(x: number, y: number): number {
  return Math.abs(x) < 1e-14 && Math.abs(y) < 1e-14 ? 1 : x / y;
}

function products(rows: readonly Float64Array[], matrix: Float64Array, p: number): Float64Array {
  const moved = rows.map((row) => times(matrix, p, row));
  return Float64Array.from(rows.flatMap((row) => moved.map((other) => innerProduct(row, other))));
}

function inverseOf(matrix: Float64Array, n: number): Float64Array {
  const l = choleskyFactor(matrix, n);
  return typeof l === 'number' ? new Float64Array(n * n).fill(NaN) : choleskyInverse(l, n);
}
