export type SignalErrorCode =
  | 'invalid_arguments'
  | 'unreadable_file'
  | 'malformed_csv'
  | 'empty_data'
  | 'missing_column'
  | 'unknown_unit'
  | 'unit_mismatch'
  | 'non_numeric_cell'
  | 'time_not_rising'
  | 'sampling_too_slow'
  | 'implausible_values'
  | 'too_few_beats'
  | 'calibration_missing'
  | 'no_filling_phase';

/** A record that cannot be read as a signal. Rows are numbered as in the file: the header is row 1. */
export class SignalError extends Error {
  constructor(
    readonly code: SignalErrorCode,
    message: string,
    readonly row?: number,
  ) {
    super(message);
    this.name = 'SignalError';
  }
}
