import { benjaminiHochberg, benjaminiYekutieli, bonferroni, hochberg, holm } from '../core/adjust.ts';
import { AnalysisError } from '../core/analysis-error.ts';
import type { Method } from '../core/method.ts';
import { required } from '../core/plan.ts';
import type { Row } from '../core/result.ts';

/** A column of p-values corrected for their number, in planned order or through gates where the plan says so. */
export const multiplicity: Method = {
  name: 'multiplicity',
  run(plan, table) {
    const { outcome } = required(plan, 'outcome');
    const values = table.numbers(outcome);
    const outside = values.findIndex((p) => p < 0 || p > 1);
    if (outside >= 0)
      throw new AnalysisError('out_of_range', { column: outcome, row: table.rowNumber(outside) });
    const families = plan.families === undefined ? null : table.keys(plan.families);
    const tested = Array.from(values.keys()).filter((row) => !Number.isNaN(values[row]!));
    if (tested.length === 0) throw new AnalysisError('empty_data', {}, 'The column holds no p-value.');
    const p = tested.map((row) => values[row]!);
    const columns: Record<string, number[]> = {
      p_value: p,
      bonferroni: bonferroni(p),
      holm: holm(p),
      hochberg: hochberg(p),
      benjamini_hochberg: benjaminiHochberg(p),
      benjamini_yekutieli: benjaminiYekutieli(p),
      ...(plan.ordered && { fixed_sequence: runningMaximum(p) }),
      ...(families && {
        gatekeeping: gatekeeping(
          p,
          tested.map((row) => families[row]!),
          new Set(families),
        ),
      }),
    };
    const position = new Map(tested.map((row, i) => [row, i]));
    const adjusted = Array.from(values.keys(), (row): Row => {
      const i = position.get(row);
      const cells = Object.entries(columns).map(([name, column]) => [
        name,
        i === undefined ? null : column[i]!,
      ]);
      return { row: table.rowNumber(row), ...(Object.fromEntries(cells) as Row) };
    });
    return { n: p.length, estimates: { n_tests: p.length }, tables: { adjusted } };
  },
};

/** Tests in planned order: each is as weak as the weakest before it. */
function runningMaximum(p: readonly number[]): number[] {
  let reached = 0;
  return p.map((value) => (reached = Math.max(reached, value)));
}

/**
 * Serial gatekeeping: Holm within a family, no smaller than the largest adjusted p-value of earlier families.
 *
 * Source   Dmitrienko & Tamhane 2007, Pharm Stat 6:171-180 (from memory)
 */
function gatekeeping(
  p: readonly number[],
  families: readonly string[],
  order: ReadonlySet<string>,
): number[] {
  const result = p.map(() => 0);
  let gate = 0;
  for (const family of order) {
    const members = families.flatMap((name, i) => (name === family ? [i] : []));
    const adjusted = holm(members.map((i) => p[i]!)).map((value) => Math.max(value, gate));
    members.forEach((i, at) => (result[i] = adjusted[at]!));
    gate = Math.max(gate, ...adjusted);
  }
  return result;
}
