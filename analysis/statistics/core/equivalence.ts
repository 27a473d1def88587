import { studentTCdf, studentTQuantile, studentTUpperTail } from '../../numerics/student-t.ts';
import { invalidPlan } from './analysis-error.ts';
import type { Plan } from './plan.ts';

/** Bounds of equivalence on the scale of the analysis. */
export interface EquivalenceBounds {
  lower: number;
  upper: number;
}

/** Two one-sided t tests of an effect against the bounds. */
export interface EquivalenceTest {
  t_lower: number;
  p_lower: number;
  t_upper: number;
  p_upper: number;
  p_value: number;
  ci_level: number;
  ci_lower: number;
  ci_upper: number;
  equivalent: number;
}

/**
 * The plan's bounds, null when it has none; logarithms when they are ratios.
 * Errors: invalid_plan for one alone, out of order, ratios that are not positive, or a confidence of one half or less.
 */
export function equivalenceBounds(plan: Plan, { ratios }: { ratios: boolean }): EquivalenceBounds | null {
  const { equivalence_lower: lower, equivalence_upper: upper } = plan;
  if (lower === undefined && upper === undefined) return null;
  if (lower === undefined || upper === undefined) {
    throw invalidPlan('"equivalence_lower" and "equivalence_upper" go together.');
  }
  if (lower >= upper) throw invalidPlan('"equivalence_lower" has to be below "equivalence_upper".');
  if (plan.confidence <= 0.5) throw invalidPlan('Equivalence needs a "confidence" above 0.5.');
  if (!ratios) return { lower, upper };
  if (lower <= 0) throw invalidPlan('"equivalence_lower" is a ratio here and has to be above 0.');
  return { lower: Math.log(lower), upper: Math.log(upper) };
}

/** Tests that the effect lies above the lower and below the upper bound, each at α = 1 − confidence. */
export function equivalenceTest(
  effect: number,
  standardError: number,
  df: number,
  { lower, upper }: EquivalenceBounds,
  confidence: number,
): EquivalenceTest {
  const alpha = 1 - confidence;
  const t_lower = (effect - lower) / standardError;
  const t_upper = (effect - upper) / standardError;
  const p_lower = studentTUpperTail(t_lower, df);
  const p_upper = studentTCdf(t_upper, df);
  const p_value = Math.max(p_lower, p_upper);
  const margin = -studentTQuantile(alpha, df) * standardError;
  return {
    t_lower,
    p_lower,
    t_upper,
    p_upper,
    p_value,
    ci_level: 1 - 2 * alpha,
    ci_lower: effect - margin,
    ci_upper: effect + margin,
    equivalent: p_value < alpha ? 1 : 0,
  };
}
