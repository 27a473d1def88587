import { AnalysisError, invalidPlan } from '../core/analysis-error.ts';
import { indexIn, outcomeValues } from '../core/cells.ts';
import { required, type Plan } from '../core/plan.ts';
import type { Table } from '../core/table.ts';
import { subjectValues } from '../variance/subject-values.ts';

/** A subject of the cross-over; values of first and second period, NaN where missing. */
export interface CrossoverSubject {
  readonly subject: string;
  /** The first listed treatment was given first. */
  readonly isAb: boolean;
  readonly outcome: readonly [number, number];
  readonly baseline: readonly [number, number];
}

/** The rows of a two-treatment, two-period cross-over by subject. */
export interface CrossoverData {
  readonly treatments: readonly [string, string];
  readonly periods: readonly [string, string];
  readonly subjects: readonly CrossoverSubject[];
}

/**
 * Reads a cross-over: rows of the two treatments and the two periods.
 *
 * Checks in the contract's order: numbers (outcome, baseline), sign, keys, levels, duplicates, sequence.
 */
export function crossoverData(plan: Plan, table: Table): CrossoverData {
  const { outcome, subject, condition, period } = required(plan, 'outcome', 'subject', 'condition', 'period');
  table.numbers(outcome);
  if (plan.baseline !== undefined) table.numbers(plan.baseline);
  const values = outcomeValues(plan, table);
  const baselines =
    plan.baseline === undefined
      ? values.map(() => NaN)
      : outcomeValues({ ...plan, outcome: plan.baseline }, table);
  const subjects = table.keys(subject);
  const [conditions, periodCells] = [table.keys(condition), table.keys(period)];
  const treatments = table.levels(condition, plan.levels);
  const periods = table.levels(period, plan.period_levels);
  if (periods.length !== 2)
    throw invalidPlan('A 2 × 2 cross-over has two periods. Name them in "period_levels".');
  const treatmentOf = indexIn(treatments, conditions);
  const periodOf = indexIn(periods, periodCells);
  const found = new Map<string, { treatment: (0 | 1 | null)[]; row: number[] }>();
  subjects.forEach((name, row) => {
    const [treatment, at] = [treatmentOf[row]!, periodOf[row]!];
    if (treatment < 0 || at < 0) return;
    const visits = found.get(name) ?? { treatment: [null, null], row: [-1, -1] };
    found.set(name, visits);
    if (visits.row[at]! >= 0 || visits.treatment.includes(treatment as 0 | 1))
      throw new AnalysisError('duplicate_cell');
    visits.row[at] = row;
    visits.treatment[at] = treatment as 0 | 1;
  });
  const result = [...found].map(([name, { treatment, row }]): CrossoverSubject => {
    const at = (cells: Float64Array) => [cells[row[0]!] ?? NaN, cells[row[1]!] ?? NaN] as const;
    const isAb = treatment[0] === null ? treatment[1] === 1 : treatment[0] === 0;
    return { subject: name, isAb, outcome: at(values), baseline: at(baselines) };
  });
  if (plan.sequence !== undefined) {
    const isUsed = (_: unknown, row: number) => treatmentOf[row]! >= 0 && periodOf[row]! >= 0;
    assertSequence(result, subjects.filter(isUsed), table.text(plan.sequence).filter(isUsed));
  }
  return {
    treatments: treatments as [string, string],
    periods: periods as [string, string],
    subjects: result,
  };
}

/** Errors: inconsistent_sequence, for two labels of one subject, or unless there are two pairs of label and order. */
function assertSequence(subjects: readonly CrossoverSubject[], rowSubjects: string[], cells: string[]): void {
  const names = subjects.map(({ subject }) => subject);
  const labels = subjectValues(names, rowSubjects, cells, 'inconsistent_sequence');
  const pairs = new Set(subjects.map(({ isAb }, i) => JSON.stringify([labels[i], isAb])));
  if (pairs.size !== 2) throw new AnalysisError('inconsistent_sequence');
}
