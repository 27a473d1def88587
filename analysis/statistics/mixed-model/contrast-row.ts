import { tTest } from '../core/t-test.ts';
import type { Contrast } from './fixed-part-inference.ts';

/** A contrast as a row of a table; without finite positive degrees of freedom there is no test and no interval. */
export type ContrastRow = {
  estimate: number;
  standard_error: number;
  df: number;
  t: number;
  p_value: number | null;
  ci_lower: number | null;
  ci_upper: number | null;
};

/** t test and interval of a contrast, `shift` added to its estimate. */
export function contrastRow(
  { estimate, standardError, df }: Contrast,
  { confidence, shift = 0 }: { confidence: number; shift?: number },
): ContrastRow {
  const shifted = estimate + shift;
  const row = { estimate: shifted, standard_error: standardError, df, t: shifted / standardError };
  if (!(df > 0 && Number.isFinite(df) && standardError > 0)) {
    return { ...row, p_value: null, ci_lower: null, ci_upper: null };
  }
  const { p_value, ci_lower, ci_upper } = tTest(shifted, standardError, df, { confidence });
  return { ...row, p_value, ci_lower, ci_upper };
}
