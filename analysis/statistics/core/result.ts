/** A row of a table of results: text (levels, terms, subjects) and numbers, null where a value does not exist. */
export type Row = Record<string, string | number | null>;

export type DropReason =
  'incomplete' | 'missing_between' | 'missing_covariate' | 'single_measurement' | 'missing_value';

/** A subject left out, or with `rows` only some of its rows. */
export interface Dropped {
  subject: string;
  reason: DropReason;
  rows?: number[];
}

export type WarningCode =
  | 'zero_differences'
  | 'normal_approximation'
  | 'confidence_not_attainable'
  | 'sphericity_test_not_available'
  | 'variance_at_boundary'
  | 'non_positive_values'
  | 'incomplete_auc'
  | 'share_not_estimable';

export interface Warning {
  code: WarningCode;
  message: string;
}

/** What a method answers; `analyse` adds the method's name, file order of `dropped` and null for non-finite numbers. */
export interface Outcome {
  /** Subjects used. */
  n: number;
  dropped?: Dropped[];
  estimates: Record<string, number | null>;
  tables?: Record<string, Row[]>;
  warnings?: Warning[];
}

/** What the command prints: the contract's section 3. */
export interface Result extends Required<Outcome> {
  method: string;
}

const messages: Record<WarningCode, string> = {
  zero_differences: 'Some differences are zero and do not count in the test.',
  normal_approximation: 'The p-value is a normal approximation with continuity correction.',
  confidence_not_attainable: 'With so few subjects no interval reaches the confidence asked for.',
  sphericity_test_not_available: 'Too few subjects for a test of sphericity.',
  variance_at_boundary: 'A variance was estimated as zero, or a correlation as one.',
  non_positive_values: 'Some values are not above 0, so the coefficients of variation are left out.',
  incomplete_auc: 'Some subjects lack the lowest or the highest dose, so they have no area under the curve.',
  share_not_estimable: 'The mean change of the whole is too close to zero for a share of it.',
};

/** A warning with its standing text. */
export function warning(code: WarningCode): Warning {
  return { code, message: messages[code] };
}
