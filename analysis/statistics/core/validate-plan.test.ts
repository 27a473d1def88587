import { Ajv2020 } from 'ajv/dist/2020.js';
import { describe, expect, it } from 'vitest';
import { planSchema } from './plan-schema.ts';
import { validatePlan } from './validate-plan.ts';

const paired = { method: 'paired_t', outcome: 'v', subject: 's', condition: 'c', levels: ['x', 'y'] };

const valid: unknown[] = [
  paired,
  { ...paired, direction: 'below', confidence: 0.9, transform: 'log', replicates: 'mean', null_value: -1 },
  { method: 'power_paired_t', effect_size: 0.4, power: 0.9 },
  { method: 'multiplicity', outcome: 'p', ordered: true },
  { method: 'friedman', outcome: 'v', subject: 's', condition: 'c' },
  {
    method: 'linear_mixed_model',
    outcome: 'v',
    subject: 's',
    fixed: ['a', ['a', 'b']],
    factors: ['a'],
    factor_levels: { a: ['1', '2'] },
    random: { slopes: ['b'], correlated: false },
    marginal_means: { factor: 'a', contrasts: 'versus_first' },
  },
  { method: 'ancova_change', outcome: 'v', subject: 's', condition: 'c', levels: ['x', 'y'], between: [] },
];

const invalid: [string, unknown][] = [
  ['no object', [paired]],
  ['no method', { outcome: 'v' }],
  ['an unknown method', { ...paired, method: 'anova' }],
  ['a misspelt field', { ...paired, confidance: 0.9 }],
  ['a missing column', { ...paired, subject: undefined, levels: ['x', 'y'] }],
  ['an empty column', { ...paired, subject: '' }],
  ['one level', { ...paired, levels: ['x'] }],
  ['three levels', { ...paired, levels: ['x', 'y', 'z'] }],
  ['a level twice', { ...paired, levels: ['x', 'x'] }],
  ['levels that are numbers', { ...paired, levels: [1, 2] }],
  ['no levels', { ...paired, levels: undefined }],
  ['a confidence of 1', { ...paired, confidence: 1 }],
  ['a confidence in words', { ...paired, confidence: '0.95' }],
  ['a null where a value belongs', { ...paired, null_value: null }],
  ['a direction of a two-sided method', { ...paired, method: 'bootstrap_ci', direction: 'above' }],
  [
    'a logarithm of changes',
    { method: 'group_share', outcome: 'b', subject: 's', covariates: ['a'], transform: 'log' },
  ],
  ['an unknown direction', { ...paired, direction: 'greater' }],
  ['too few levels for ranks of k samples', { ...paired, method: 'friedman' }],
  ['a fraction of a resample', { ...paired, method: 'bootstrap_ci', resamples: 10.5 }],
  ['a negative seed', { ...paired, method: 'bootstrap_ci', seed: -1 }],
  ['no delta', { ...paired, method: 'paired_delta_adjusted', deltas: [] }],
  ['a delta in words', { ...paired, method: 'paired_delta_adjusted', deltas: ['1'] }],
  ['one subject', { method: 'power_paired_t', effect_size: 1, n: 1 }],
  [
    'two covariates of a share',
    { method: 'group_share', outcome: 'b', subject: 's', covariates: ['a', 'c'] },
  ],
  ['an empty interaction', { method: 'linear_mixed_model', outcome: 'v', subject: 's', fixed: [[]] }],
  ['a number as a term', { method: 'linear_mixed_model', outcome: 'v', subject: 's', fixed: [1] }],
  [
    'two slopes',
    { method: 'linear_mixed_model', outcome: 'v', subject: 's', random: { slopes: ['a', 'b'] } },
  ],
  [
    'an unknown random effect',
    { method: 'linear_mixed_model', outcome: 'v', subject: 's', random: { slope: 'a' } },
  ],
  [
    'marginal means of nothing',
    { method: 'linear_mixed_model', outcome: 'v', subject: 's', marginal_means: {} },
  ],
];

const asJson = (plan: unknown) => JSON.parse(JSON.stringify(plan)) as unknown;
const accepts = new Ajv2020({ strict: false }).compile(planSchema);

describe('validatePlan', () => {
  it.each(valid.map((plan) => [plan]))('accepts %j, as the published schema does', (plan) => {
    expect(validatePlan(asJson(plan))).toMatchObject(plan as object);
    expect(accepts(asJson(plan))).toBe(true);
  });

  it.each(invalid)('refuses %s, as the published schema does', (_, plan) => {
    expect(() => validatePlan(asJson(plan))).toThrowError(
      expect.objectContaining({ code: 'invalid_plan' }) as Error,
    );
    expect(accepts(asJson(plan))).toBe(false);
  });

  it('fills in the defaults of the contract', () => {
    expect(validatePlan(paired)).toMatchObject({
      confidence: 0.95,
      direction: 'both',
      adjust: 'holm',
      transform: 'none',
      replicates: 'error',
      null_value: 0,
      limit_multiplier: 1.96,
      resamples: 10000,
      alpha: 0.05,
    });
  });

  it('takes a single text or number for a list of one', () => {
    const plan = validatePlan({
      method: 'repeatability',
      outcome: 'v',
      subject: 's',
      condition: 'c',
      levels: 'x',
    });
    expect(plan.levels).toEqual(['x']);
  });

  it('says which field is wrong and what it has to be', () => {
    expect(() => validatePlan({ ...paired, confidence: 2 })).toThrow('"confidence" has to be below 1.');
    expect(() => validatePlan({ ...paired, levels: ['x'] })).toThrow('exactly 2 in "levels", not 1');
    expect(() => validatePlan({ ...paired, outcom: 'v' })).toThrow('no field "outcom"');
  });
});
