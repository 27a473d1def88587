import { DomainError } from '../../units/errors.ts';
import { requireFinite, requireNotNegative, requirePositive } from '../../units/require.ts';

export type FiellerInterval =
  { readonly bounded: true; readonly lower: number; readonly upper: number } | { readonly bounded: false };

/**
 * Fieller's confidence set of a ratio A/B.
 *
 * Formula  all s with (A − sB)² ≤ t² (var A − 2s cov + s² var B)
 * Units    A and B in one unit, result 1
 * Shape    scalars
 * Domain   variances ≥ 0, cov² ≤ var A · var B, t > 0; bounded only where |B| > t SE(B), else "not estimable"
 * Errors   DomainError naming the argument; never NaN
 * Assumes  A and B jointly normal; t is the quantile for the df of the variances (small groups), z only for known ones
 * Source   Fieller 1954, J R Stat Soc B 16:175-185
 */
export function fiellerInterval(
  numerator: number,
  denominator: number,
  variances: { readonly numerator: number; readonly denominator: number; readonly covariance?: number },
  tQuantile: number,
): FiellerInterval {
  const { numerator: varA, denominator: varB, covariance = 0 } = variances;
  requireFinite('numerator', numerator);
  requireFinite('denominator', denominator);
  requireNotNegative('variances.numerator', varA);
  requireNotNegative('variances.denominator', varB);
  requireFinite('variances.covariance', covariance);
  if (covariance ** 2 > varA * varB * (1 + 1e-12)) {
    throw new DomainError('variances.covariance', 'at most the geometric mean of the variances', covariance);
  }
  requirePositive('tQuantile', tQuantile);
  const square = tQuantile ** 2;
  const a = denominator ** 2 - square * varB;
  if (a <= 0) return { bounded: false };
  const b = numerator * denominator - square * covariance;
  const c = numerator ** 2 - square * varA;
  const half = Math.sqrt(Math.max(0, b ** 2 - a * c));
  return { bounded: true, lower: (b - half) / a, upper: (b + half) / a };
}
