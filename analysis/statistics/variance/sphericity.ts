import { chiSquareUpperTail } from '../../numerics/chi-square.ts';
import { symmetricEigen } from '../../numerics/linear-algebra-eigen.ts';

/** How far the covariance of orthonormal contrasts is from a multiple of the identity. */
export interface Sphericity {
  /** Mauchly's W and its p-value; null for one contrast, or with fewer error degrees of freedom than contrasts. */
  readonly mauchlyW: number | null;
  readonly mauchlyP: number | null;
  /** Greenhouse and Geisser's estimate. */
  readonly gg: number;
  /** Huynh and Feldt's estimate, not capped at 1; null where its denominator vanishes. */
  readonly hf: number | null;
}

/**
 * Sphericity of an error cross-product matrix E of m orthonormal contrasts with ν degrees of freedom.
 *
 * Formula  GG (tr E)²/(m tr E²); HF ((ν+1)m GG − 2)/(m(ν − m GG)); W = det E/(tr E/m)^m
 * Source   Greenhouse and Geisser 1959, Psychometrika 24:95-112; Huynh and Feldt 1976, J Educ Stat 1:69-82;
 *          Mauchly 1940, Ann Math Stat 11:204-209, with the second-order term of Anderson 2003, section 10.7
 *
 * @param errorProducts row-major m × m
 */
export function sphericity(errorProducts: Float64Array, m: number, nu: number): Sphericity {
  if (m === 1) return { mauchlyW: null, mauchlyP: null, gg: 1, hf: 1 };
  const values = symmetricEigen(errorProducts, m).values.map((value) => Math.max(value, 0));
  const trace = values.reduce((sum, value) => sum + value, 0);
  const gg = trace ** 2 / (m * values.reduce((sum, value) => sum + value * value, 0));
  const denominator = m * (nu - m * gg);
  const hf = denominator > 1e-12 ? ((nu + 1) * m * gg - 2) / denominator : null;
  if (nu < m) return { mauchlyW: null, mauchlyP: null, gg, hf };
  const logW = values.reduce((sum, value) => sum + Math.log(value / (trace / m)), 0);
  return { mauchlyW: Math.exp(logW), mauchlyP: mauchlyPValue(logW, m, nu), gg, hf };
}

function mauchlyPValue(logW: number, m: number, nu: number): number {
  const rho = 1 - (2 * m * m + m + 2) / (6 * m * nu);
  const omega =
    ((m + 2) * (m - 1) * (m - 2) * (2 * m ** 3 + 6 * m * m + 3 * m + 2)) / (288 * (m * nu * rho) ** 2);
  const x = -nu * rho * logW;
  const df = (m * (m + 1)) / 2 - 1;
  const first = chiSquareUpperTail(x, df);
  return first + omega * (chiSquareUpperTail(x, df + 4) - first);
}
