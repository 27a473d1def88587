import { AnalysisError } from '../core/analysis-error.ts';
import { indexIn, outcomeValues, requireSubjects } from '../core/cells.ts';
import { required, type Plan } from '../core/plan.ts';
import type { Dropped } from '../core/result.ts';
import type { Table } from '../core/table.ts';
import type { Variable } from '../mixed-model/fixed-design.ts';

/** The rows that a mixed model uses. */
export interface ModelRows {
  readonly outcome: Float64Array;
  /** Position of each row's subject in order of first used row. */
  readonly subjects: Int32Array;
  readonly subjectCount: number;
  /** The columns of the plan's fixed and random terms by name. */
  readonly variables: ReadonlyMap<string, Variable>;
  readonly dropped: Dropped[];
}

/** Columns of the fixed terms and of the random slope, each once, in the plan's order. */
function modelColumns(plan: Plan): string[] {
  return [...new Set([...(plan.fixed ?? []).flat(), ...(plan.random?.slopes ?? [])])];
}

/**
 * Reads the rows of a linear mixed model: those with a listed level of every factor and no empty cell.
 *
 * Checks in the contract's order: numbers, sign, keys, levels, completeness. Rows with an empty cell are reported as
 * `missing_value`, rows with an unlisted level are ignored.
 */
export function linearMixedModelRows(plan: Plan, table: Table): ModelRows {
  const { outcome, subject } = required(plan, 'outcome', 'subject');
  const columns = modelColumns(plan);
  const isFactor = (column: string) => (plan.factors ?? []).includes(column);
  table.numbers(outcome);
  const numbers = new Map(columns.filter((c) => !isFactor(c)).map((c) => [c, table.numbers(c)]));
  const values = outcomeValues(plan, table);
  const subjects = table.keys(subject);
  const factors = new Map(
    columns.filter(isFactor).map((column) => {
      const levels = table.levels(column, plan.factor_levels?.[column]);
      if (levels.length < 2) throw new AnalysisError('level_missing');
      return [column, { levels, codes: indexIn(levels, table.text(column)) }] as const;
    }),
  );
  const { used, dropped } = selectRows(table, subjects, (row) => {
    let isMissing = Number.isNaN(values[row]!);
    for (const [column, { codes }] of factors) {
      if (codes[row]! >= 0) continue;
      if (table.text(column)[row] !== '') return 'ignored';
      isMissing = true;
    }
    for (const column of numbers.values()) isMissing ||= Number.isNaN(column[row]!);
    return isMissing ? 'missing' : 'used';
  });
  const positions = new Map<string, number>();
  const subjectOf = Int32Array.from(used, (row) => positionOf(positions, subjects[row]!));
  requireSubjects(positions.size, 2);
  const variables = columns.map((name): [string, Variable] => {
    const factor = factors.get(name);
    if (factor === undefined) {
      return [
        name,
        { kind: 'covariate', name, values: Float64Array.from(used, (row) => numbers.get(name)![row]!) },
      ];
    }
    const codes = Int32Array.from(used, (row) => factor.codes[row]!);
    return [name, { kind: 'factor', name, levels: factor.levels, codes }];
  });
  return {
    outcome: Float64Array.from(used, (row) => values[row]!),
    subjects: subjectOf,
    subjectCount: positions.size,
    variables: new Map(variables),
    dropped,
  };
}

/** Sorts rows into used and missing ones; the missing ones are listed by subject, in order of first missing row. */
export function selectRows(
  table: Table,
  subjects: readonly string[],
  judge: (row: number) => 'used' | 'missing' | 'ignored',
): { used: number[]; dropped: Dropped[] } {
  const used: number[] = [];
  const missing = new Map<string, number[]>();
  for (let row = 0; row < table.size; row += 1) {
    const verdict = judge(row);
    if (verdict === 'used') used.push(row);
    if (verdict !== 'missing') continue;
    const rows = missing.get(subjects[row]!) ?? [];
    rows.push(table.rowNumber(row));
    missing.set(subjects[row]!, rows);
  }
  const dropped = [...missing].map(([subject, rows]): Dropped => ({
    subject,
    reason: 'missing_value',
    rows,
  }));
  return { used, dropped };
}

/** Position of a text in order of first request. */
export function positionOf(positions: Map<string, number>, text: string): number {
  const known = positions.get(text);
  if (known !== undefined) return known;
  positions.set(text, positions.size);
  return positions.size - 1;
}
