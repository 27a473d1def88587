import { requireFinite, requireNotNegative } from '../units/require.ts';

/**
 * Standard deviation of a sum of two independent terms.
 *
 * Formula  √((c₁ s₁)² + (c₂ s₂)²)
 * Units    each c·s in one unit
 * Shape    scalars
 * Domain   finite; SDs ≥ 0
 * Errors   DomainError naming the argument; never NaN
 * Assumes  independent terms
 * Source   propagation of errors; reference case hd-090 (Tamariz 2008, Am J Epidemiol 168:1153, table 3)
 */
export function linearCombinationDeviation(
  coefficient1: number,
  deviation1: number,
  coefficient2: number,
  deviation2: number,
): number {
  requireFinite('coefficient1', coefficient1);
  requireFinite('coefficient2', coefficient2);
  requireNotNegative('deviation1', deviation1);
  requireNotNegative('deviation2', deviation2);
  return Math.hypot(coefficient1 * deviation1, coefficient2 * deviation2);
}
