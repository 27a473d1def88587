/** What a plan can take as an outcome; each is analysed as its natural logarithm. */
export const outcomes = ['resistance', 'viscosity', 'hindrance', 'conductance'] as const;
export type OutcomeKey = (typeof outcomes)[number];

/** A viscosity law with its parameters, by the law's id. */
export interface ChosenLaw {
  law: string;
  shearRate?: number;
  diameter?: number;
}

/**
 * A plan: what is compared, on which outcomes, with which law and method, decided before the data are seen.
 * It can be written by hand; `studyPlanSchema` says what it may hold.
 */
export interface StudyPlan {
  title: string;
  /** The question in words: population, conditions, variable, summary, what is done about intercurrent events. */
  estimand: string;
  design: 'crossover-2x2' | 'parallel' | 'single-group';
  /** [x, y]: every ratio is x over y. A single group compares times instead and needs none. */
  conditions: [string, string] | null;
  /** Measured quantity that is the flow. */
  flow: 'forearmBloodFlow' | 'brachialBloodFlow';
  /** The time whose value stands for no change yet; each period has its own. */
  baselineTimePoint: string;
  timePoint: string;
  /** Null where no blood sample is taken: then there is no split. */
  viscosity: { law: ChosenLaw; plasma: 'measured' | number } | null;
  primary: OutcomeKey;
  secondary: OutcomeKey[];
  method: 'crossover_2x2' | 'ancova_change' | 'paired_t';
  /** "Hardly changes" is a claim of equivalence: margins as ratios, two one-sided tests. */
  equivalence: { outcome: OutcomeKey; lower: number; upper: number } | null;
  confidence: number;
  multiplicity: 'none' | 'holm' | 'fixed_sequence';
  /** What is done about missing values, in words; the method itself uses complete participants. */
  missingData: string;
  /** Laws shown beside the chosen one; at least three where there is a split. */
  sensitivityLaws: ChosenLaw[];
  seed: number;
}

const text = { type: 'string', minLength: 1, maxLength: 4000 } as const;
const key = { type: 'string', minLength: 1, maxLength: 60 } as const;
const law = {
  type: 'object',
  additionalProperties: false,
  required: ['law'],
  properties: {
    law: key,
    shearRate: { type: 'number', exclusiveMinimum: 0, maximum: 10_000 },
    diameter: { type: 'number', exclusiveMinimum: 3.3, maximum: 1978 },
  },
} as const;
const orNull = (schema: object): object => ({ anyOf: [{ type: 'null' }, schema] });

/** JSON Schema (2020-12) of a plan. */
export const studyPlanSchema = {
  type: 'object',
  additionalProperties: false,
  required: [
    'title',
    'estimand',
    'design',
    'conditions',
    'flow',
    'baselineTimePoint',
    'timePoint',
    'viscosity',
    'primary',
    'secondary',
    'method',
    'equivalence',
    'confidence',
    'multiplicity',
    'missingData',
    'sensitivityLaws',
    'seed',
  ],
  properties: {
    title: { ...text, maxLength: 200 },
    estimand: text,
    design: { enum: ['crossover-2x2', 'parallel', 'single-group'] },
    conditions: orNull({ type: 'array', items: key, minItems: 2, maxItems: 2, uniqueItems: true }),
    flow: { enum: ['forearmBloodFlow', 'brachialBloodFlow'] },
    baselineTimePoint: key,
    timePoint: key,
    viscosity: orNull({
      type: 'object',
      additionalProperties: false,
      required: ['law', 'plasma'],
      properties: {
        law,
        plasma: { anyOf: [{ const: 'measured' }, { type: 'number', minimum: 0.7, maximum: 10 }] },
      },
    }),
    primary: { enum: outcomes },
    secondary: { type: 'array', items: { enum: outcomes }, uniqueItems: true, maxItems: 3 },
    method: { enum: ['crossover_2x2', 'ancova_change', 'paired_t'] },
    equivalence: orNull({
      type: 'object',
      additionalProperties: false,
      required: ['outcome', 'lower', 'upper'],
      properties: {
        outcome: { enum: outcomes },
        lower: { type: 'number', exclusiveMinimum: 0, exclusiveMaximum: 1 },
        upper: { type: 'number', exclusiveMinimum: 1, maximum: 10 },
      },
    }),
    confidence: { type: 'number', minimum: 0.5, maximum: 0.999 },
    multiplicity: { enum: ['none', 'holm', 'fixed_sequence'] },
    missingData: text,
    sensitivityLaws: { type: 'array', maxItems: 8, items: law },
    seed: { type: 'integer', minimum: 0, maximum: 2_147_483_647 },
  },
} as const;
