/** Codes of bad input; the contract fixes which fields each carries. */
export type ErrorCode =
  | 'invalid_plan'
  | 'malformed_csv'
  | 'empty_data'
  | 'unknown_column'
  | 'non_numeric_cell'
  | 'non_positive_value'
  | 'out_of_range'
  | 'missing_key'
  | 'level_missing'
  | 'duplicate_cell'
  | 'inconsistent_between'
  | 'inconsistent_sequence'
  | 'too_few_subjects'
  | 'too_few_replicates'
  | 'too_few_doses'
  | 'too_many_subjects'
  | 'zero_variance'
  | 'no_nonzero_differences'
  | 'no_convergence';

/** Where the bad input stands. */
export interface ErrorFields {
  column?: string;
  row?: number;
  level?: string;
  subject?: string;
}

/**
 * The plan or the data cannot be analysed. Everything else that is thrown is a defect.
 *
 * @example throw new AnalysisError('missing_key', { column: 'subject', row: 7 })
 */
export class AnalysisError extends Error {
  constructor(
    readonly code: ErrorCode,
    readonly fields: ErrorFields = {},
    detail?: string,
  ) {
    super(detail ?? explanations[code](fields));
    this.name = 'AnalysisError';
  }

  /** The object that the command prints. */
  toJSON(): { error: { code: ErrorCode; message: string } & ErrorFields } {
    return { error: { code: this.code, ...this.fields, message: this.message } };
  }
}

/** Refuses the plan, saying which field and what it has to be. */
export function invalidPlan(detail: string): AnalysisError {
  return new AnalysisError('invalid_plan', {}, detail);
}

const explanations: Record<ErrorCode, (fields: ErrorFields) => string> = {
  invalid_plan: () => 'The plan is not valid.',
  malformed_csv: () => 'The data are not a CSV file with one header row and rows of equal length.',
  empty_data: () => 'The data hold no row to analyse. Give at least one data row below the header.',
  unknown_column: ({ column }) => `The plan names the column "${column}", which the data do not have.`,
  non_numeric_cell: ({ column, row }) =>
    `Row ${row} of the column "${column}" is not a number. Write a decimal point, or leave the cell empty if it is missing.`,
  non_positive_value: ({ column, row }) =>
    `Row ${row} of the column "${column}" is not above 0, so it has no logarithm.`,
  out_of_range: ({ column, row }) =>
    column === undefined
      ? 'No number of subjects or effect gives the power that the plan asks for.'
      : `Row ${row} of the column "${column}" is not between 0 and 1.`,
  missing_key: ({ column, row }) => `Row ${row} of the column "${column}" is empty, but has to be filled in.`,
  level_missing: ({ column, level }) =>
    level === undefined
      ? 'Fewer than two levels to compare were found.'
      : `The level "${level}" does not occur in the column "${column}".`,
  duplicate_cell: () =>
    'A subject has several rows for one cell. Remove them, or average them where the method allows it.',
  inconsistent_between: ({ subject }) =>
    `The subject "${subject}" has different values of something that belongs to the subject.`,
  inconsistent_sequence: ({ subject }) =>
    subject === undefined
      ? 'The sequence labels contradict the order in which the treatments were given.'
      : `The subject "${subject}" has two sequence labels.`,
  too_few_subjects: () => 'Too few subjects with complete data for this method.',
  too_few_replicates: () => 'No subject has replicates, so the variation within subjects is unknown.',
  too_few_doses: () => 'A dose–response curve needs at least 3 doses and 4 rows.',
  too_many_subjects: () => 'Too many subjects for this method.',
  zero_variance: () => 'The values do not vary, so there is nothing to test.',
  no_nonzero_differences: () => 'All differences are zero, so there is nothing to test.',
  no_convergence: () => 'The curve could not be fitted: no best set of parameters was found.',
};
