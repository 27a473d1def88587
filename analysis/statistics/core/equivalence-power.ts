import { logGamma } from '../../numerics/log-gamma.ts';
import { normalCdf } from '../../numerics/normal.ts';
import { integrate } from '../../numerics/quadrature.ts';
import { studentTQuantile } from '../../numerics/student-t.ts';
import type { EquivalenceBounds } from './equivalence.ts';

/**
 * Exact power of two one-sided t tests at level alpha.
 *
 * Formula  E over v = s/σ of max(0, Φ((U − t·v·se − Δ)/se) − Φ((L + t·v·se − Δ)/se)), df·v² from χ² with df
 *          degrees of freedom, se the true standard error, t the 1 − α quantile
 * Domain   standardError above 0, df above 0, alpha in (0, ½)
 * Accuracy relative 1e-11
 * Source   Phillips 1990, J Pharmacokinet Biopharm 18:137-144
 */
export function equivalencePower(
  difference: number,
  standardError: number,
  df: number,
  { lower, upper }: EquivalenceBounds,
  alpha: number,
): number {
  const t = -studentTQuantile(alpha, df);
  const widest = (upper - lower) / (2 * t * standardError);
  const constant = Math.log(2) + (df / 2) * Math.log(df / 2) - logGamma(df / 2);
  const integrand = (v: number): number => {
    const density = Math.exp(constant + (df - 1) * Math.log(v) - (df * v * v) / 2);
    const top = (upper - difference) / standardError - t * v;
    const bottom = (lower - difference) / standardError + t * v;
    // Of two upper-tail areas the smaller difference is lost, so the side is chosen by sign.
    const chance = bottom > 0 ? normalCdf(-bottom) - normalCdf(-top) : normalCdf(top) - normalCdf(bottom);
    return density * Math.max(0, chance);
  };
  const width = 1 / Math.sqrt(2 * df);
  const low = widest > 1 ? Math.max(0, 1 - 12 * width) : 0;
  const high = Math.min(widest, 1 + 12 * width);
  const breaks = [low, ...[1 - 4 * width, 1, 1 + 4 * width].filter((v) => v > low && v < high), high];
  let sum = 0;
  for (let i = 1; i < breaks.length; i += 1) sum += integrate(integrand, breaks[i - 1]!, breaks[i]!, 1e-12);
  return sum;
}
