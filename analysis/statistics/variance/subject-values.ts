import { AnalysisError, type ErrorCode } from '../core/analysis-error.ts';

/**
 * One value for each subject of a column whose cells are text, or numbers; null where all its cells are empty.
 * All rows of the file count.
 *
 * Shape    subjects: those to answer for; rowSubjects and cells: one element a row, '' or NaN where empty
 * Errors   `code` with the first subject that has two values
 */
export function subjectValues<Value extends string | number>(
  subjects: readonly string[],
  rowSubjects: readonly string[],
  cells: ArrayLike<Value>,
  code: ErrorCode = 'inconsistent_between',
): (Value | null)[] {
  const found = new Map<string, Value>();
  const inconsistent = new Set<string>();
  rowSubjects.forEach((subject, row) => {
    const value = cells[row]!;
    if (value === '' || Number.isNaN(value)) return;
    const known = found.get(subject);
    if (known === undefined) found.set(subject, value);
    else if (known !== value) inconsistent.add(subject);
  });
  const first = subjects.find((subject) => inconsistent.has(subject));
  if (first !== undefined) throw new AnalysisError(code, { subject: first });
  return subjects.map((subject) => found.get(subject) ?? null);
}
