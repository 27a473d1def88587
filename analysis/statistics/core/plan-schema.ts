import { methodNames, type MethodName, type Plan } from './plan.ts';

/** The keywords of JSON Schema 2020-12 that plans need; `validatePlan` understands exactly these. */
export interface FieldSchema {
  readonly type: 'string' | 'number' | 'integer' | 'boolean' | 'array' | 'object';
  readonly description?: string;
  readonly default?: string | number | boolean;
  readonly enum?: readonly string[];
  readonly minLength?: number;
  readonly minimum?: number;
  readonly maximum?: number;
  readonly exclusiveMinimum?: number;
  readonly exclusiveMaximum?: number;
  readonly minItems?: number;
  readonly maxItems?: number;
  readonly uniqueItems?: boolean;
  readonly items?: FieldSchema | { readonly anyOf: readonly FieldSchema[] };
  readonly properties?: Readonly<Record<string, FieldSchema>>;
  readonly required?: readonly string[];
  readonly additionalProperties?: false | FieldSchema;
}

/** What a method asks of its plan beyond the types of the fields. */
export interface MethodRule {
  readonly required: readonly (keyof Plan)[];
  /** Least and largest number of elements of a list. */
  readonly counts?: Readonly<Partial<Record<keyof Plan, readonly [number, number]>>>;
}

const column = (description: string): FieldSchema => ({ type: 'string', minLength: 1, description });
const columns = (description: string): FieldSchema => ({
  type: 'array',
  items: { type: 'string', minLength: 1 },
  uniqueItems: true,
  description,
});
const names = (description: string, minItems: number): FieldSchema => ({
  type: 'array',
  items: { type: 'string' },
  minItems,
  uniqueItems: true,
  description,
});
const choice = (values: readonly string[], description: string): FieldSchema => ({
  type: 'string',
  enum: values,
  default: values[0]!,
  description,
});
const positive = (description: string): FieldSchema => ({ type: 'number', exclusiveMinimum: 0, description });
const probability = (description: string): FieldSchema => ({
  type: 'number',
  exclusiveMinimum: 0,
  exclusiveMaximum: 1,
  description,
});

/** Every field of a plan. Unknown fields are refused: a misspelt one would silently fall back to its default. */
export const planFields: Readonly<Record<keyof Plan, FieldSchema>> = {
  method: { type: 'string', enum: methodNames, description: 'the method' },
  outcome: column('column of the values analysed'),
  subject: column('column that says whose value it is'),
  condition: column('column of the condition compared within subjects'),
  period: column('column of the period of a cross-over'),
  sequence: column('column of the order of treatments; checked against the periods'),
  dose: column('column of the dose'),
  replicate: column('column that links repeated pairs'),
  baseline: column('column of the value before treatment, of the same period'),
  families: column('column of the family of a hypothesis'),
  levels: names('levels of the condition in order; differences are first minus second', 1),
  period_levels: names('first and second period', 2),
  within: columns('columns of the factors within subjects'),
  between: columns('column of the group of a subject'),
  covariates: columns('columns of covariates'),
  factors: columns('columns that are categorical'),
  factor_levels: {
    type: 'object',
    additionalProperties: names('levels of this column in order', 1),
    description: 'levels by column',
  },
  fixed: {
    type: 'array',
    items: {
      anyOf: [
        { type: 'string', minLength: 1 },
        { type: 'array', items: { type: 'string', minLength: 1 }, minItems: 1, uniqueItems: true },
      ],
    },
    description: 'fixed terms: a column, or a list of columns for their interaction',
  },
  random: {
    type: 'object',
    properties: {
      slopes: { type: 'array', items: { type: 'string', minLength: 1 }, maxItems: 1 },
      correlated: { type: 'boolean' },
    },
    additionalProperties: false,
    description: 'random effects of the subject beside the intercept',
  },
  marginal_means: {
    type: 'object',
    properties: {
      factor: { type: 'string', minLength: 1 },
      by: { type: 'string', minLength: 1 },
      contrasts: { type: 'string', enum: ['pairwise', 'versus_first'] },
    },
    required: ['factor'],
    additionalProperties: false,
    description: 'adjusted means of a factor and their contrasts',
  },
  estimation: choice(['REML', 'ML'], 'how variances are estimated'),
  df_method: choice(['satterthwaite', 'kenward_roger'], 'degrees of freedom of the mixed model'),
  confidence: { ...probability('confidence of intervals'), default: 0.95 },
  direction: choice(['both', 'above', 'below'], 'side on which the difference is expected'),
  adjust: choice(
    ['holm', 'bonferroni', 'benjamini_hochberg', 'none'],
    'correction for the number of comparisons',
  ),
  transform: choice(['none', 'log'], 'natural logarithm of the outcome before anything else'),
  replicates: choice(['error', 'mean'], 'several rows of one subject and cell'),
  null_value: { type: 'number', default: 0, description: 'hypothesised difference' },
  null_ratio: { ...positive('hypothesised ratio'), default: 1 },
  equivalence_lower: { type: 'number', description: 'lower bound of equivalence' },
  equivalence_upper: { type: 'number', description: 'upper bound of equivalence' },
  limit_multiplier: { ...positive('standard deviations from the bias to a limit'), default: 1.96 },
  design: choice(['paired', 'replicated_constant', 'replicated_varying'], 'design of the agreement study'),
  statistic: choice(['mean', 'median'], 'statistic that is resampled'),
  resamples: {
    type: 'integer',
    minimum: 1,
    maximum: 10_000_000,
    default: 10_000,
    description: 'number of resamples',
  },
  seed: {
    type: 'integer',
    minimum: 0,
    maximum: Number.MAX_SAFE_INTEGER,
    default: 1,
    description: 'seed of the random numbers',
  },
  deltas: {
    type: 'array',
    items: { type: 'number' },
    minItems: 1,
    description: 'shifts of the mean difference of incomplete subjects',
  },
  model: choice(['emax', 'log_logistic', 'none'], 'dose–response curve'),
  ordered: {
    type: 'boolean',
    default: false,
    description: 'the order of the file is the planned order of the tests',
  },
  effect_size: { type: 'number', description: 'mean difference over the standard deviation of differences' },
  mean_difference: { type: 'number', description: 'expected mean difference' },
  sd_difference: positive('standard deviation of the differences'),
  n: { type: 'number', minimum: 2, description: 'number of subjects' },
  power: probability('power'),
  alpha: { ...probability('significance level'), default: 0.05 },
  objective: choice(['difference', 'equivalence'], 'what the cross-over shall show'),
  difference: { type: 'number', description: 'expected difference of the treatments' },
  within_subject_sd: positive('standard deviation within subjects'),
  ratio: positive('expected ratio of the treatments'),
  cv: positive('coefficient of variation within subjects, as a fraction'),
};

const cells = ['outcome', 'subject', 'condition'] as const;
const twoLevels: MethodRule = { required: [...cells, 'levels'], counts: { levels: [2, 2] } };

export const methodRules: Readonly<Record<MethodName, MethodRule>> = {
  paired_t: twoLevels,
  wilcoxon_signed_rank: twoLevels,
  sign_test: twoLevels,
  one_way_rm_anova: { required: cells },
  two_way_rm_anova: { required: ['outcome', 'subject', 'within'], counts: { within: [2, 2] } },
  mixed_anova: {
    required: ['outcome', 'subject', 'within', 'between'],
    counts: { within: [1, 1], between: [1, 1] },
  },
  friedman: { required: cells, counts: { levels: [3, Infinity] } },
  crossover_2x2: {
    required: [...cells, 'levels', 'period'],
    counts: { levels: [2, 2], period_levels: [2, 2] },
  },
  linear_mixed_model: { required: ['outcome', 'subject'] },
  ancova_change: { required: [...cells, 'levels'], counts: { levels: [2, 2], between: [0, 1] } },
  bland_altman: twoLevels,
  icc: { required: cells },
  repeatability: { required: ['outcome', 'subject'] },
  equivalence_paired: {
    required: [...cells, 'levels', 'equivalence_lower', 'equivalence_upper'],
    counts: { levels: [2, 2] },
  },
  bootstrap_ci: twoLevels,
  group_share: { required: ['outcome', 'subject', 'covariates'], counts: { covariates: [1, 1] } },
  paired_delta_adjusted: { required: [...cells, 'levels', 'deltas'], counts: { levels: [2, 2] } },
  permutation_paired: twoLevels,
  shapiro_wilk: { required: ['outcome', 'subject'] },
  power_paired_t: { required: [] },
  power_crossover: { required: [] },
  allometric_scaling: {
    required: ['outcome', 'subject', 'covariates'],
    counts: { covariates: [1, Infinity] },
  },
  geometric_mean_ratio: twoLevels,
  correlation_within_subject: {
    required: ['outcome', 'subject', 'covariates'],
    counts: { covariates: [1, Infinity] },
  },
  dose_response: { required: ['outcome', 'dose'] },
  multiplicity: { required: ['outcome'] },
};

const directional: readonly MethodName[] = [
  'paired_t',
  'wilcoxon_signed_rank',
  'sign_test',
  'geometric_mean_ratio',
  'permutation_paired',
  'power_paired_t',
  'power_crossover',
];
const untransformed: readonly MethodName[] = [
  'repeatability',
  'group_share',
  'correlation_within_subject',
  'dose_response',
  'multiplicity',
  'allometric_scaling',
];

/** Fields that a method takes with one value only: to ignore a direction or a logarithm would answer another question. */
export function settledFields(method: MethodName): Partial<Record<keyof Plan, string>> {
  return {
    ...(!directional.includes(method) && { direction: 'both' }),
    ...(untransformed.includes(method) && { transform: 'none' }),
  };
}

/**
 * JSON Schema (2020-12) of an analysis plan: what `validatePlan` enforces, for editors, the API and its description.
 * What one field means for another (bounds in order, two of three power quantities) is left to the methods.
 */
export const planSchema = {
  $schema: 'https://json-schema.org/draft/2020-12/schema',
  title: 'Analysis plan',
  type: 'object',
  properties: planFields,
  required: ['method'],
  additionalProperties: false,
  allOf: methodNames.map((method) => ({
    if: { properties: { method: { const: method } }, required: ['method'] },
    then: {
      required: methodRules[method].required,
      properties: {
        ...Object.fromEntries(
          Object.entries(methodRules[method].counts ?? {}).map(([field, [minItems, maxItems]]) => [
            field,
            Number.isFinite(maxItems) ? { minItems, maxItems } : { minItems },
          ]),
        ),
        ...Object.fromEntries(
          Object.entries(settledFields(method)).map(([field, value]) => [field, { const: value }]),
        ),
      },
    },
  })),
} as const;
