import {
  choleskyFactor,
  choleskyInverse,
  choleskyLogDeterminant,
  choleskySolve,
  innerProduct,
} from '../../numerics/linear-algebra.ts';
import { unpack } from './cross-products.ts';
import {
  addSymmetric,
  emptyExpansion,
  expandLogDeterminant,
  expandResidual,
  PAIRS,
  type Expansion,
} from './likelihood-derivatives.ts';
import {
  emptyPatternCovariance,
  patternCovariance,
  type PatternCovariance,
  type RelativeFactor,
} from './relative-covariance.ts';
import type { SubjectStatistics } from './subject-statistics.ts';
import { weightedMoments } from './weighted-moments.ts';

/** The two parts of −2 log likelihood that depend on Φ, and the generalised least-squares fit there. */
export interface LikelihoodParts {
  /** ln|V| + ln|X'V⁻¹X| (REML) or ln|V| (ML), V in units of the residual variance. */
  readonly logDeterminants: Expansion;
  /** Weighted residual sum of squares r'V⁻¹r. */
  readonly residual: Expansion;
  readonly coefficients: Float64Array;
  /** (X'V⁻¹X)⁻¹. */
  readonly unscaledCovariance: Float64Array;
  /** −∂(X'V⁻¹X)/∂Φ: positive semi-definite for the two variances. */
  readonly informationLoss: readonly Float64Array[];
}

/**
 * Evaluates the parts of the likelihood of a linear mixed model at Φ = ΛΛ'.
 *
 * With K as in `PatternCovariance`, S = Σ K⁻¹ : moments + within is the weighted cross-product of [X y], and
 * ∂S/∂Φ_i = −Σ K⁻¹D_iK⁻¹ : moments with D₁₁ = r₁r₁', D₂₁ = r₁r₂' + r₂r₁', D₂₂ = r₂r₂'. The rest follows from S:
 * the Schur complement of its corner is the residual sum of squares, the coefficients make it least.
 *
 * Errors  null when X'V⁻¹X is not positive definite to rounding
 * Source  Bates et al. 2015, J Stat Softw 67(1), section 3 (profiled criterion); derivatives by hand
 */
export function likelihoodParts(
  statistics: SubjectStatistics,
  factor: RelativeFactor,
  reml: boolean,
): LikelihoodParts | null {
  const p = statistics.columns;
  const logDeterminants = emptyExpansion();
  const slopes = logDeterminants.gradient;
  const curvatures = new Float64Array(PAIRS.length);
  const k = emptyPatternCovariance();
  const sums = weightedMoments(statistics, 4 + PAIRS.length, (pattern, weights) => {
    patternCovariance(statistics, pattern, factor, k);
    weights.set(k.inverse);
    const count = statistics.counts[pattern]!;
    logDeterminants.value += count * k.logDeterminant;
    const { g11, g12, g22 } = k;
    slopes[0]! += count * g11;
    slopes[1]! += count * 2 * g12;
    slopes[2]! += count * g22;
    curvatures[0]! -= count * g11 * g11;
    curvatures[1]! -= count * 2 * g11 * g12;
    curvatures[2]! -= count * g12 * g12;
    curvatures[3]! -= count * 2 * (g11 * g22 + g12 * g12);
    curvatures[4]! -= count * 2 * g12 * g22;
    curvatures[5]! -= count * g22 * g22;
    writeDerivativeWeights(weights, k);
  });
  addSymmetric(logDeterminants.hessian, 1, curvatures);
  const packed = statistics.packed;
  for (let e = 0; e < packed; e += 1) sums[e]! += statistics.within[e]!;
  const slot = (index: number) => sums.subarray(index * packed, (index + 1) * packed);
  const cross = unpack(slot(0), p);
  const l = choleskyFactor(cross.matrix, p, SINGULAR);
  if (typeof l === 'number') return null;
  const coefficients = choleskySolve(l, p, cross.vector);
  const unscaledCovariance = choleskyInverse(l, p);
  const residual = emptyExpansion();
  residual.value = cross.corner - innerProduct(coefficients, cross.vector);
  const first = [1, 2, 3].map((index) => unpack(slot(index), p));
  const second = PAIRS.map((_, index) => slot(4 + index));
  expandResidual(residual, first, second, coefficients, unscaledCovariance, p);
  if (reml) {
    logDeterminants.value += choleskyLogDeterminant(l, p);
    expandLogDeterminant(logDeterminants, first, second, unscaledCovariance, p);
  }
  const informationLoss = first.map((block) => block.matrix);
  return { logDeterminants, residual, coefficients, unscaledCovariance, informationLoss };
}

const SINGULAR = 1e-15;

/** Weights of K⁻¹D_iK⁻¹ (slots 1 to 3) and of the symmetric part of K⁻¹D_iK⁻¹D_jK⁻¹ (slots 4 to 9). */
function writeDerivativeWeights(weights: Float64Array, { v1, v2, g11, g12, g22 }: PatternCovariance): void {
  const [x1, y1] = v1;
  const [x2, y2] = v2;
  for (let element = 0; element < 3; element += 1) {
    const n11 = element === 0 ? x1 * x1 : element === 1 ? x1 * y1 : y1 * y1;
    const n21 = element === 0 ? 2 * x1 * x2 : element === 1 ? x1 * y2 + y1 * x2 : 2 * y1 * y2;
    const n22 = element === 0 ? x2 * x2 : element === 1 ? x2 * y2 : y2 * y2;
    weights[3 + element] = n11;
    weights[6 + element] = n21;
    weights[9 + element] = n22;
    weights[12 + element] = g11 * n11;
    weights[15 + element] = g12 * n11 + 0.5 * g11 * n21;
    weights[18 + element] = 0.5 * g12 * n21;
    weights[21 + element] = g22 * n11 + g12 * n21 + g11 * n22;
    weights[24 + element] = 0.5 * g22 * n21 + g12 * n22;
    weights[27 + element] = g22 * n22;
  }
}
