import { mean, sumOfProducts, sumOfSquares } from '../core/moments.ts';
import { tTest } from '../core/t-test.ts';

/** An effect with its t test; without variation there is no test. */
export type EffectTest = {
  effect: number;
  se: number;
  ci_lower: number | null;
  ci_upper: number | null;
  t: number | null;
  df: number;
  p_value: number | null;
};

/** Values of the two orders of a cross-over, AB (the first treatment first) and BA. */
export interface ByOrder {
  readonly ab: Float64Array;
  readonly ba: Float64Array;
}

/** t test of an effect; `se` may be zero. */
export function effectTest(effect: number, se: number, df: number, confidence: number): EffectTest {
  if (!(se > 0)) return { effect, se, ci_lower: null, ci_upper: null, t: null, df, p_value: null };
  const { t, p_value, ci_lower, ci_upper } = tTest(effect, se, df, { confidence });
  return { effect, se, ci_lower, ci_upper, t, df, p_value };
}

/**
 * The combination weights[0] · mean AB + weights[1] · mean BA, tested with the pooled variance.
 *
 * Source  Hills and Armitage 1979, Br J Clin Pharmacol 8:7-20
 */
export function pooledEffect(
  { ab, ba }: ByOrder,
  weights: readonly [number, number],
  confidence: number,
): EffectTest {
  const df = ab.length + ba.length - 2;
  const pooled = (sumOfSquares(ab) + sumOfSquares(ba)) / df;
  const effect = combination(mean(ab), mean(ba), weights);
  return effectTest(effect, Math.sqrt(pooled * variancePerUnit(ab, ba, weights)), df, confidence);
}

/** Effects adjusted for a difference of baselines, with the least-squares coefficient of that difference. */
export interface AdjustedEffects {
  readonly residualSumOfSquares: number;
  readonly treatment: EffectTest;
  readonly period: EffectTest;
  readonly coefficient: EffectTest;
}

/**
 * Least squares of the period difference on 1, the order (AB +1, BA −1) and the period difference of the baseline:
 * the coefficient comes from the deviations within orders, the other two from the adjusted means of the orders.
 *
 * Domain  baseline differences that vary within an order; at least 4 subjects
 * Source  Kenward and Roger 2010, Biostatistics 11:1-17 (from memory); analysis of covariance by hand
 */
export function adjustedEffects(outcome: ByOrder, baseline: ByOrder, confidence: number): AdjustedEffects {
  const squares = sumOfSquares(baseline.ab) + sumOfSquares(baseline.ba);
  const coefficient =
    (sumOfProducts(baseline.ab, outcome.ab) + sumOfProducts(baseline.ba, outcome.ba)) / squares;
  const left = (order: 'ab' | 'ba') => {
    const [meanOutcome, meanBaseline] = [mean(outcome[order]), mean(baseline[order])];
    return sumOfSquares(
      outcome[order].map((y, i) => y - meanOutcome - coefficient * (baseline[order][i]! - meanBaseline)),
    );
  };
  const residualSumOfSquares = left('ab') + left('ba');
  const df = outcome.ab.length + outcome.ba.length - 3;
  const variance = residualSumOfSquares / df;
  const adjusted = (weights: readonly [number, number]) => {
    const shift = combination(mean(baseline.ab), mean(baseline.ba), weights);
    const effect = combination(mean(outcome.ab), mean(outcome.ba), weights) - coefficient * shift;
    const perUnit = variancePerUnit(outcome.ab, outcome.ba, weights) + shift ** 2 / squares;
    return effectTest(effect, Math.sqrt(variance * perUnit), df, confidence);
  };
  return {
    residualSumOfSquares,
    treatment: adjusted(TREATMENT),
    period: adjusted(PERIOD),
    coefficient: effectTest(coefficient, Math.sqrt(variance / squares), df, confidence),
  };
}

/** Weights of mean period differences (first − second) that give treatment A − B, and period first − second. */
export const TREATMENT = [0.5, -0.5] as const;
export const PERIOD = [0.5, 0.5] as const;
/** Weights of mean sums that give the carry-over. */
export const CARRYOVER = [1, -1] as const;

function combination(ab: number, ba: number, [forAb, forBa]: readonly [number, number]): number {
  return forAb * ab + forBa * ba;
}

function variancePerUnit(
  ab: Float64Array,
  ba: Float64Array,
  [forAb, forBa]: readonly [number, number],
): number {
  return forAb ** 2 / ab.length + forBa ** 2 / ba.length;
}
