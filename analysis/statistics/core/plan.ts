import type { Adjustment } from './adjust.ts';
import { invalidPlan } from './analysis-error.ts';
import type { Direction } from './t-test.ts';

/** The methods of the contract, in its order. */
export const methodNames = [
  'paired_t',
  'wilcoxon_signed_rank',
  'sign_test',
  'one_way_rm_anova',
  'two_way_rm_anova',
  'mixed_anova',
  'friedman',
  'crossover_2x2',
  'linear_mixed_model',
  'ancova_change',
  'bland_altman',
  'icc',
  'repeatability',
  'equivalence_paired',
  'bootstrap_ci',
  'group_share',
  'paired_delta_adjusted',
  'permutation_paired',
  'shapiro_wilk',
  'power_paired_t',
  'power_crossover',
  'allometric_scaling',
  'geometric_mean_ratio',
  'correlation_within_subject',
  'dose_response',
  'multiplicity',
] as const;

export type MethodName = (typeof methodNames)[number];

/**
 * A plan that has passed `validatePlan`: the fields of the contract under their own names, defaults filled in.
 * Read a field that a method requires by `required(plan, 'outcome', 'subject')`, which types it as present.
 */
export interface Plan {
  method: MethodName;
  outcome?: string;
  subject?: string;
  condition?: string;
  period?: string;
  sequence?: string;
  dose?: string;
  replicate?: string;
  baseline?: string;
  families?: string;
  levels?: string[];
  period_levels?: string[];
  within?: string[];
  between?: string[];
  covariates?: string[];
  factors?: string[];
  factor_levels?: Record<string, string[]>;
  /** A term is a column, or the columns of an interaction. */
  fixed?: (string | string[])[];
  random?: { slopes?: string[]; correlated?: boolean };
  marginal_means?: { factor: string; by?: string; contrasts?: 'pairwise' | 'versus_first' };
  estimation: 'REML' | 'ML';
  df_method: 'satterthwaite' | 'kenward_roger';
  confidence: number;
  direction: Direction;
  adjust: Adjustment;
  transform: 'none' | 'log';
  replicates: 'error' | 'mean';
  null_value: number;
  null_ratio: number;
  equivalence_lower?: number;
  equivalence_upper?: number;
  limit_multiplier: number;
  design: 'paired' | 'replicated_constant' | 'replicated_varying';
  statistic: 'mean' | 'median';
  resamples: number;
  seed: number;
  deltas?: number[];
  model: 'emax' | 'log_logistic' | 'none';
  ordered: boolean;
  effect_size?: number;
  mean_difference?: number;
  sd_difference?: number;
  n?: number;
  power?: number;
  alpha: number;
  objective: 'difference' | 'equivalence';
  difference?: number;
  within_subject_sd?: number;
  ratio?: number;
  cv?: number;
}

/** The named fields of the plan, present. Errors: invalid_plan naming the first absent one. */
export function required<Field extends keyof Plan>(plan: Plan, ...fields: Field[]): PlanWith<Field> {
  if (hasFields(plan, fields)) return plan;
  throw invalidPlan(`The plan needs "${fields.find((field) => plan[field] === undefined)}".`);
}

/** A plan on which these fields are present. */
type PlanWith<Field extends keyof Plan> = Plan & Required<Pick<Plan, Field>>;

function hasFields<Field extends keyof Plan>(plan: Plan, fields: readonly Field[]): plan is PlanWith<Field> {
  return fields.every((field) => plan[field] !== undefined);
}

/** Levels are those of a condition. Errors: invalid_plan. */
export function requireConditionOfLevels({ levels, condition }: Plan): void {
  if (levels !== undefined && condition === undefined)
    throw invalidPlan('"levels" needs "condition" beside it.');
}
