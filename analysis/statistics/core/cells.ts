import { naturalLogarithm } from '../../numerics/natural-logarithm.ts';
import { AnalysisError } from './analysis-error.ts';
import type { Plan } from './plan.ts';
import { required } from './plan.ts';
import type { Dropped } from './result.ts';
import type { Table } from './table.ts';

/** Values by subject and cell; `values[i][j]` of subject i in cell j, NaN where missing. */
export interface SubjectCells {
  subjects: string[];
  values: Float64Array[];
}

/** Complete subjects by level: `columns[j][i]` is the value of subject i at level j. */
export interface CompleteCells {
  levels: string[];
  subjects: string[];
  columns: Float64Array[];
  dropped: Dropped[];
}

/**
 * The outcome of every row, on the scale of the analysis: natural logarithms with `transform: log`.
 * Errors: non_numeric_cell, non_positive_value. NaN where empty.
 */
export function outcomeValues(plan: Plan, table: Table): Float64Array {
  const { outcome } = required(plan, 'outcome');
  const values = table.numbers(outcome);
  return plan.transform === 'log' ? logarithmsOf(table.positive(outcome, values)) : values;
}

/** Natural logarithms of checked values; NaN (missing) stays NaN. */
export function logarithmsOf(values: Float64Array): Float64Array {
  return values.map((value) => (Number.isNaN(value) ? NaN : naturalLogarithm(value)));
}

/**
 * Puts the values of the rows into cells, one row of cells a subject, in order of first used row.
 *
 * Shape    subjects, cellOf and values have one element a row of the file; cellOf is −1 for a row that is not used
 * Errors   duplicate_cell, unless the plan averages replicates (after the transform, missing ones left out)
 */
export function gatherCells(
  plan: Plan,
  rows: { subjects: readonly string[]; cellOf: ArrayLike<number>; values: Float64Array; cellCount: number },
): SubjectCells {
  const positions = new Map<string, number>();
  const lists: number[][][] = [];
  let duplicate = false;
  rows.subjects.forEach((subject, row) => {
    const cell = rows.cellOf[row]!;
    if (cell < 0) return;
    let position = positions.get(subject);
    if (position === undefined) {
      position = positions.size;
      positions.set(subject, position);
      lists.push(Array.from({ length: rows.cellCount }, () => []));
    }
    const list = lists[position]![cell]!;
    if (list.length > 0) duplicate = true;
    list.push(rows.values[row]!);
  });
  if (duplicate && plan.replicates !== 'mean') throw new AnalysisError('duplicate_cell');
  return {
    subjects: [...positions.keys()],
    values: lists.map((cells) => Float64Array.from(cells, averageOfPresent)),
  };
}

/**
 * The outcome by subject and level of `condition`, complete subjects only: what most methods start from.
 *
 * Checks, in the contract's order: numbers, sign, keys (subject, condition), levels, duplicates, completeness.
 * Errors   also too_few_subjects below `least`, level_missing (without fields) below two levels
 */
export function completeCells(
  plan: Plan,
  table: Table,
  {
    least = 2,
    requireLevels = twoLevels,
  }: { least?: number; requireLevels?: (levels: string[]) => void } = {},
): CompleteCells {
  const { subject, condition } = required(plan, 'subject', 'condition');
  const values = outcomeValues(plan, table);
  const subjects = table.keys(subject);
  const conditions = table.keys(condition);
  const levels = table.levels(condition, plan.levels);
  requireLevels(levels);
  const cells = gatherCells(plan, {
    subjects,
    cellOf: indexIn(levels, conditions),
    values,
    cellCount: levels.length,
  });
  const complete = completeRows(cells);
  requireSubjects(complete.subjects.length, least);
  return { levels, ...complete };
}

/** Splits subjects into those with every cell, as columns, and the dropped ones (`incomplete`). */
export function completeRows({ subjects, values }: SubjectCells): Omit<CompleteCells, 'levels'> {
  const kept = values.map((row) => !row.some(Number.isNaN));
  const rows = values.filter((_, i) => kept[i]);
  const cellCount = values[0]?.length ?? 0;
  return {
    subjects: subjects.filter((_, i) => kept[i]),
    columns: Array.from({ length: cellCount }, (_, j) => Float64Array.from(rows, (row) => row[j]!)),
    dropped: subjects.filter((_, i) => !kept[i]).map((subject) => ({ subject, reason: 'incomplete' })),
  };
}

/** Position of each text among the levels, −1 where it is none of them. */
export function indexIn(levels: readonly string[], texts: readonly string[]): Int32Array {
  const positions = new Map(levels.map((level, index) => [level, index]));
  return Int32Array.from(texts, (text) => positions.get(text) ?? -1);
}

/** Errors: level_missing, without fields. */
function twoLevels(levels: string[]): void {
  if (levels.length < 2) throw new AnalysisError('level_missing');
}

/** Errors: too_few_subjects below `least`. */
export function requireSubjects(count: number, least: number): void {
  if (count < least) {
    throw new AnalysisError(
      'too_few_subjects',
      {},
      `${count} subjects have complete data; this method needs ${least}.`,
    );
  }
}

function averageOfPresent(list: number[]): number {
  if (list.length === 1) return list[0]!;
  const present = list.filter((value) => !Number.isNaN(value));
  if (present.length === 0) return NaN;
  const shift = present[0]!;
  return shift + present.reduce((sum, value) => sum + (value - shift), 0) / present.length;
}
