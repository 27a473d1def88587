import {
  studentTCdf,
  studentTQuantile,
  studentTTwoSided,
  studentTUpperTail,
} from '../../numerics/student-t.ts';

/** Direction of the hypothesis: the difference lies on either side, above or below the null value. */
export type Direction = 'both' | 'above' | 'below';

/** A t test of an estimate with its confidence interval; null on the open side of a one-sided one. */
export interface TTest {
  t: number;
  df: number;
  p_value: number;
  ci_lower: number | null;
  ci_upper: number | null;
}

/**
 * t test of estimate − nullValue with the interval estimate ∓ t·se.
 *
 * Shape    one-sided `above` has a lower bound at `confidence`, `below` an upper one
 * Domain   standardError above 0, df above 0, confidence in (0, 1)
 */
export function tTest(
  estimate: number,
  standardError: number,
  df: number,
  {
    confidence,
    nullValue = 0,
    direction = 'both',
  }: { confidence: number; nullValue?: number; direction?: Direction },
): TTest {
  const t = (estimate - nullValue) / standardError;
  const tail = direction === 'both' ? (1 - confidence) / 2 : 1 - confidence;
  const margin = -studentTQuantile(tail, df) * standardError;
  return {
    t,
    df,
    p_value: tPValue(t, df, direction),
    ci_lower: direction === 'below' ? null : estimate - margin,
    ci_upper: direction === 'above' ? null : estimate + margin,
  };
}

/** p-value of a t statistic, each tail computed as itself. */
export function tPValue(t: number, df: number, direction: Direction): number {
  if (direction === 'above') return studentTUpperTail(t, df);
  return direction === 'below' ? studentTCdf(t, df) : studentTTwoSided(t, df);
}
