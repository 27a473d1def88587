import { likelihoodParts, type LikelihoodParts } from './likelihood.ts';
import type { Expansion } from './likelihood-derivatives.ts';
import type { Objective } from './optimise.ts';
import type { RelativeFactor } from './relative-covariance.ts';
import type { SubjectStatistics } from './subject-statistics.ts';

/** Positions in `RelativeFactor` of the elements that are estimated; the others are zero. */
export type FreeElements = readonly (0 | 1 | 2)[];

/** What is known at a point of the profiled deviance. */
export interface ProfilePoint {
  readonly factor: RelativeFactor;
  readonly parts: LikelihoodParts;
}

/** Number by which the residual sum of squares is divided to give the residual variance. */
export function residualDegrees(statistics: SubjectStatistics, reml: boolean): number {
  return reml ? statistics.rows - statistics.columns : statistics.rows;
}

/**
 * −2 (restricted) log likelihood up to a constant as a function of the free elements of Λ, the residual variance
 * and the coefficients at their best for each Λ: ln|V| + ln|X'V⁻¹X| + n ln(r'V⁻¹r).
 *
 * Λ is not bounded: the sign of a diagonal element does not matter, so a variance of zero is a smooth minimum.
 */
export function profiledDeviance(
  statistics: SubjectStatistics,
  { reml, free }: { reml: boolean; free: FreeElements },
): Objective<ProfilePoint> {
  const n = residualDegrees(statistics, reml);
  return (point) => {
    const factor = factorOf(point, free);
    const parts = likelihoodParts(statistics, factor, reml);
    if (parts === null || !(parts.residual.value > 0)) return null;
    const { logDeterminants, residual } = parts;
    const expansion: Expansion = {
      value: logDeterminants.value + n * Math.log(residual.value),
      gradient: logDeterminants.gradient.map(
        (value, i) => value + (n * residual.gradient[i]!) / residual.value,
      ),
      hessian: logDeterminants.hessian.map((value, ij) => {
        const slopes = residual.gradient[Math.floor(ij / 3)]! * residual.gradient[ij % 3]!;
        return value + n * (residual.hessian[ij]! / residual.value - slopes / residual.value ** 2);
      }),
    };
    return { point, detail: { factor, parts }, ...byFreeElements(expansion, factor, free) };
  };
}

function factorOf(point: Float64Array, free: FreeElements): RelativeFactor {
  const factor: [number, number, number] = [0, 0, 0];
  free.forEach((element, i) => (factor[element] = point[i]!));
  return factor;
}

/** Turns derivatives by Φ = ΛΛ' into derivatives by the free elements of Λ (row-major Hessian). */
export function byFreeElements(
  { value, gradient, hessian }: Expansion,
  factor: RelativeFactor,
  free: FreeElements,
): Expansion {
  const [l11, l21, l22] = factor;
  // Rows: ∂(Φ₁₁, Φ₂₁, Φ₂₂) by Λ₁₁, Λ₂₁, Λ₂₂.
  const jacobian = [
    [2 * l11, l21, 0],
    [0, l11, 2 * l21],
    [0, 0, 2 * l22],
  ] as const;
  const [g1, g2, g3] = gradient as unknown as [number, number, number];
  const curvature = [
    [2 * g1, g2, 0],
    [g2, 2 * g3, 0],
    [0, 0, 2 * g3],
  ] as const;
  const result = {
    value,
    gradient: new Float64Array(free.length),
    hessian: new Float64Array(free.length ** 2),
  };
  free.forEach((a, i) => {
    for (let r = 0; r < 3; r += 1) result.gradient[i]! += jacobian[a][r]! * gradient[r]!;
    free.forEach((b, j) => {
      let sum = curvature[a][b];
      for (let r = 0; r < 3; r += 1) {
        for (let c = 0; c < 3; c += 1) sum += jacobian[a][r]! * hessian[3 * r + c]! * jacobian[b][c]!;
      }
      result.hessian[i * free.length + j] = sum;
    });
  });
  return result;
}
