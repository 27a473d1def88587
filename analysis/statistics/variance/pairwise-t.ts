import { adjustPValues, type Adjustment } from '../core/adjust.ts';
import { mean } from '../core/moments.ts';
import { differencesOf, pairedTTest } from '../core/paired-difference.ts';

/** A paired comparison of two levels; without variation there is no test. */
export type PairwiseRow = {
  level_1: string;
  level_2: string;
  mean_difference: number;
  sd_difference: number;
  standard_error: number;
  ci_lower: number | null;
  ci_upper: number | null;
  t: number | null;
  df: number;
  p_value: number | null;
  p_adjusted: number | null;
};

/** Paired t tests of all pairs of levels on complete subjects; pairs that do not vary do not count in the adjustment. */
export function pairwiseT(
  levels: readonly string[],
  columns: readonly Float64Array[],
  { confidence, adjust }: { confidence: number; adjust: Adjustment },
): PairwiseRow[] {
  const rows = levels.flatMap((level_1, i) =>
    levels.slice(i + 1).map((level_2, offset) => ({
      level_1,
      level_2,
      ...compare(columns[i]!, columns[i + 1 + offset]!, confidence),
    })),
  );
  const adjusted = adjustPValues(
    rows.map((row) => row.p_value),
    adjust,
  );
  return rows.map((row, i) => ({ ...row, p_adjusted: adjusted[i]! }));
}

function compare(x: Float64Array, y: Float64Array, confidence: number) {
  const { difference, constant } = differencesOf(x, y);
  if (constant) {
    const none = { ci_lower: null, ci_upper: null, t: null, df: difference.length - 1, p_value: null };
    return { mean_difference: mean(difference), sd_difference: 0, standard_error: 0, ...none };
  }
  const { n: _n, ...test } = pairedTTest(difference, { confidence });
  return test;
}
