import { symmetricEigen } from '../../numerics/linear-algebra-eigen.ts';
import { bilinearForm, innerProduct, times } from '../../numerics/linear-algebra.ts';
import type { MixedModelFit } from './fit.ts';
import type { FixedPartInference, FTest } from './fixed-part-inference.ts';
import { byFreeElements } from './profiled-deviance.ts';

/** Directions in which the normalised information is below this carry no information. */
const FLAT = 1e-9;
/** Eigenvalues below this part of the largest count as zero. */
const RANK = 1.5e-8;

/**
 * Satterthwaite's degrees of freedom from the observed information.
 *
 * The variance parameters are taken as the free elements of Λ and the logarithm τ of the residual variance. At the
 * optimum the information of any smooth set of parameters gives the same degrees of freedom, at a boundary the
 * elements that are left do. With F = −2 log likelihood and C = exp(τ)(X'V⁻¹X)⁻¹ the variance of l'Cl is
 * 2g'F''⁻¹g, g its gradient, and df = 2(l'Cl)²/(2g'F''⁻¹g).
 *
 * Source  Satterthwaite 1946, Biometrics Bull 2:110-114; Fai and Cornelius 1996, J Stat Comput Simul 54:363-378
 *         (several rows); Kuznetsova et al. 2017, J Stat Softw 82(13)
 */
export function satterthwaite(fit: MixedModelFit): FixedPartInference {
  const p = fit.coefficients.length;
  const covariance = fit.parts.unscaledCovariance.map((value) => value * fit.residualVariance);
  const information = pseudoInverse(deviancesCurvature(fit), fit.free.length + 1);
  const dfOf = (weights: Float64Array): number => {
    const gradient = varianceGradient(fit, weights);
    const variance = bilinearForm(covariance, p, weights, weights);
    return variance ** 2 / bilinearForm(information, gradient.length, gradient, gradient);
  };
  return {
    contrast: (weights) => ({
      estimate: innerProduct(weights, fit.coefficients),
      standardError: Math.sqrt(bilinearForm(covariance, p, weights, weights)),
      df: dfOf(weights),
    }),
    test: (rows) => rotatedTest(rows, fit.coefficients, covariance, dfOf),
  };
}

/** Second derivatives of −2 log likelihood by the free elements of Λ, and τ last; row-major. */
function deviancesCurvature({
  parts,
  factor,
  free,
  residualVariance,
  statistics,
  reml,
}: MixedModelFit): Float64Array {
  const k = free.length;
  const logs = byFreeElements(parts.logDeterminants, factor, free);
  const residual = byFreeElements(parts.residual, factor, free);
  const curvature = new Float64Array((k + 1) ** 2);
  for (let i = 0; i < k; i += 1) {
    for (let j = 0; j < k; j += 1) {
      curvature[i * (k + 1) + j] = logs.hessian[i * k + j]! + residual.hessian[i * k + j]! / residualVariance;
    }
    curvature[i * (k + 1) + k] = -residual.gradient[i]! / residualVariance;
    curvature[k * (k + 1) + i] = -residual.gradient[i]! / residualVariance;
  }
  curvature[k * (k + 1) + k] = reml ? statistics.rows - statistics.columns : statistics.rows;
  return curvature;
}

/** Derivatives of l'Cl by the same parameters. */
function varianceGradient(
  { parts, factor, free, residualVariance }: MixedModelFit,
  weights: Float64Array,
): Float64Array {
  const p = weights.length;
  const moved = times(parts.unscaledCovariance, p, weights);
  const byPhi = parts.informationLoss.map((loss) => residualVariance * bilinearForm(loss, p, moved, moved));
  const expansion = { value: 0, gradient: Float64Array.from(byPhi), hessian: new Float64Array(9) };
  const { gradient } = byFreeElements(expansion, factor, free);
  return Float64Array.of(...gradient, residualVariance * innerProduct(weights, moved));
}

/** Inverse of a symmetric matrix on its informative directions, after its diagonal is made one. */
function pseudoInverse(matrix: Float64Array, n: number): Float64Array {
  const scale = Array.from({ length: n }, (_, i) => 1 / Math.sqrt(Math.abs(matrix[i * n + i]!) || 1));
  const at = (k: number) => scale[Math.floor(k / n)]! * scale[k % n]!;
  const { values, vectors } = symmetricEigen(
    matrix.map((value, k) => value * at(k)),
    n,
  );
  const inverse = new Float64Array(n * n);
  vectors.forEach((vector, v) => {
    if (values[v]! <= FLAT) return;
    for (let k = 0; k < n * n; k += 1)
      inverse[k]! += (vector[Math.floor(k / n)]! * vector[k % n]!) / values[v]!;
  });
  return inverse.map((value, k) => value * at(k));
}

/** Wald F of the rows; its df from those of the uncorrelated one-row contrasts that the rows are rotated to. */
function rotatedTest(
  rows: readonly Float64Array[],
  coefficients: Float64Array,
  covariance: Float64Array,
  dfOf: (weights: Float64Array) => number,
): FTest {
  const p = coefficients.length;
  const size = rows.length;
  const variance = new Float64Array(size * size);
  rows.forEach((a, i) =>
    rows.forEach((b, j) => (variance[i * size + j] = bilinearForm(covariance, p, a, b))),
  );
  const { values, vectors } = symmetricEigen(variance, size);
  const kept = vectors.filter((_, k) => values[k]! > RANK * values[0]!);
  const rotated = kept.map((vector) =>
    Float64Array.from({ length: p }, (_, c) => rows.reduce((sum, row, i) => sum + vector[i]! * row[c]!, 0)),
  );
  const squares = rotated.map((row, k) => innerProduct(row, coefficients) ** 2 / values[k]!);
  const df1 = rotated.length;
  return {
    f: squares.reduce((sum, square) => sum + square, 0) / df1,
    df1,
    df2: combinedDf(rotated.map(dfOf)),
  };
}

function combinedDf(dfs: readonly number[]): number {
  const [first] = dfs as [number];
  if (dfs.every((df, i) => i === 0 || Math.abs(df - dfs[i - 1]!) < 1e-8)) {
    return dfs.length === 1 ? first : dfs.reduce((sum, df) => sum + df, 0) / dfs.length;
  }
  if (dfs.some((df) => df <= 2)) return 2;
  const expectation = dfs.reduce((sum, df) => sum + df / (df - 2), 0);
  return (2 * expectation) / (expectation - dfs.length);
}
