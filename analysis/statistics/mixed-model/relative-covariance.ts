import type { SubjectStatistics } from './subject-statistics.ts';

/**
 * Elements of the lower Cholesky factor Λ of the random-effects covariance divided by the residual variance:
 * [Λ₁₁, Λ₂₁, Λ₂₂]. With a random intercept alone the last two are zero.
 */
export type RelativeFactor = readonly [number, number, number];

/** Per pattern: K = I + R ΛΛ' R' and what its derivatives need. */
export interface PatternCovariance {
  logDeterminant: number;
  /** K⁻¹ as a, b, c of (a, b; b, c). */
  inverse: [number, number, number];
  /** K⁻¹r₁ and K⁻¹r₂, r₁ and r₂ the columns of R: ∂K/∂Φ is made of their products. */
  v1: [number, number];
  v2: [number, number];
  /** r₁'K⁻¹r₁, r₁'K⁻¹r₂, r₂'K⁻¹r₂. */
  g11: number;
  g12: number;
  g22: number;
}

/** A `PatternCovariance` to be filled by `patternCovariance`. */
export function emptyPatternCovariance(): PatternCovariance {
  return { logDeterminant: 0, inverse: [1, 0, 1], v1: [0, 0], v2: [0, 0], g11: 0, g12: 0, g22: 0 };
}

/**
 * Fills `into` for one pattern. The determinant is 1 + |RΛ|² + det(RΛ)², a sum of squares: no digits are lost
 * however large or nearly singular the random effects are.
 */
export function patternCovariance(
  { r11: R11, r12: R12, r22: R22 }: SubjectStatistics,
  pattern: number,
  [l11, l21, l22]: RelativeFactor,
  into: PatternCovariance,
): void {
  const r11 = R11[pattern]!;
  const r12 = R12[pattern]!;
  const r22 = R22[pattern]!;
  const b11 = r11 * l11 + r12 * l21;
  const b12 = r12 * l22;
  const b21 = r22 * l21;
  const b22 = r22 * l22;
  const determinant = 1 + b11 * b11 + b12 * b12 + b21 * b21 + b22 * b22 + (b11 * b22 - b12 * b21) ** 2;
  const a = (1 + b21 * b21 + b22 * b22) / determinant;
  const b = -(b11 * b21 + b12 * b22) / determinant;
  const c = (1 + b11 * b11 + b12 * b12) / determinant;
  into.logDeterminant = Math.log(determinant);
  into.inverse[0] = a;
  into.inverse[1] = b;
  into.inverse[2] = c;
  into.v1[0] = a * r11;
  into.v1[1] = b * r11;
  into.v2[0] = a * r12 + b * r22;
  into.v2[1] = b * r12 + c * r22;
  into.g11 = r11 * into.v1[0];
  into.g12 = r11 * into.v2[0];
  into.g22 = r12 * into.v2[0] + r22 * into.v2[1];
}
