import { analyse } from '../analyse.ts';
import { AnalysisError } from '../core/analysis-error.ts';
import type { Result } from '../core/result.ts';

/** The text of a data file from a header and rows; null is an empty cell. */
export function csvOf(
  header: readonly string[],
  rows: readonly (readonly (string | number | null)[])[],
): string {
  return [header, ...rows].map((row) => row.map((cell) => cell ?? '').join(',')).join('\n');
}

/** Long data of columns by level, subjects S1, S2, …; columns subject, condition, value. */
export function longCsv(levels: Record<string, readonly (number | null)[]>): string {
  const rows = Object.entries(levels).flatMap(([level, values]) =>
    values.map((value, i) => [`S${i + 1}`, level, value] as const),
  );
  return csvOf(['subject', 'condition', 'value'], rows);
}

/** Runs a method on `longCsv` data with the columns named as there. */
export function analyseLong(plan: object, levels: Record<string, readonly (number | null)[]>): Result {
  const columns = {
    outcome: 'value',
    subject: 'subject',
    condition: 'condition',
    levels: Object.keys(levels),
  };
  return analyse({ ...columns, ...plan }, longCsv(levels));
}

/** The error object that the work is refused with, without its message; fails when it is not refused. */
export function refusalOf(work: () => unknown): Record<string, unknown> {
  try {
    work();
  } catch (error) {
    if (!(error instanceof AnalysisError)) throw error;
    const { message, ...rest } = error.toJSON().error;
    if (message === '') throw new Error('The refusal has no message.');
    return rest;
  }
  throw new Error('Nothing was refused.');
}
