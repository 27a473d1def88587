import { describe, expect, it } from 'vitest';
import { analyse } from '../analyse.ts';
import { refusalOf } from '../testing/data.ts';

const estimates = (plan: object) => analyse(plan, null).estimates;

describe('power_paired_t', () => {
  const plan = { method: 'power_paired_t' };

  it('needs the tabulated number of subjects', () => {
    // Cohen 1988, table 2.4.1, for one sample: n = 34 for d = 0.5 at 80 per cent (from memory)
    expect(estimates({ ...plan, effect_size: 0.5, power: 0.8 })['n_required']).toBe(34);
  });

  it('returns to the number and the effect from the power', () => {
    const power = estimates({ ...plan, effect_size: 0.6, n: 19 })['power'];
    expect(estimates({ ...plan, effect_size: 0.6, power })['n']).toBeCloseTo(19, 9);
    expect(estimates({ ...plan, n: 19, power })['effect_size']).toBeCloseTo(0.6, 10);
    expect(estimates({ ...plan, n: 19, power, sd_difference: 2 })['mean_difference']).toBeCloseTo(1.2, 10);
  });

  it('has the level as its power without an effect, and an effect below zero for the direction below', () => {
    expect(estimates({ ...plan, effect_size: 0, n: 10 })['power']).toBeCloseTo(0.05, 12);
    const below = estimates({ ...plan, n: 10, power: 0.9, direction: 'below' });
    const above = estimates({ ...plan, n: 10, power: 0.9, direction: 'above' });
    expect(below['effect_size']).toBeCloseTo(-above['effect_size']!, 12);
  });

  it('counts subjects at the top level', () => {
    expect(analyse({ ...plan, effect_size: 0.5, power: 0.8 }, null).n).toBe(34);
    expect(analyse({ ...plan, effect_size: 0.5, n: 12 }, null).n).toBe(12);
  });

  it.each([
    { effect_size: 0, power: 0.8 },
    { effect_size: -0.5, power: 0.8, direction: 'above' },
    { effect_size: 60, power: 0.1 },
    { n: 10, power: 0.05 },
  ])('says that nothing solves %j', (quantities) => {
    expect(refusalOf(() => analyse({ ...plan, ...quantities }, null))).toEqual({ code: 'out_of_range' });
  });

  it.each([
    { effect_size: 0.5 },
    { effect_size: 0.5, n: 10, power: 0.8 },
    { mean_difference: 1, n: 10 },
    { mean_difference: 1, sd_difference: 2, effect_size: 0.5, n: 10 },
  ])('refuses too few or too many quantities: %j', (quantities) => {
    expect(refusalOf(() => analyse({ ...plan, ...quantities }, null))).toEqual({ code: 'invalid_plan' });
  });
});

describe('power_crossover', () => {
  const equivalence = {
    method: 'power_crossover',
    objective: 'equivalence',
    equivalence_lower: 0.8,
    equivalence_upper: 1.25,
    power: 0.8,
  };

  it.each([
    [0.2, 0.95, 20],
    [0.25, 0.95, 28],
    [0.3, 0.95, 40],
    [0.3, 1, 32],
  ])('needs the tabulated number for a variation of %d and a ratio of %d: %d', (cv, ratio, n) => {
    // Diletti, Hauschke & Steinijans 1991, Int J Clin Pharmacol 29:1-8, 80 per cent power (from memory)
    expect(estimates({ ...equivalence, cv, ratio })['n_required']).toBe(n);
  });

  it('agrees with the two-sample t test of the same noncentrality: 64 a group for d = 0.5 (Cohen 1988)', () => {
    const plan = {
      method: 'power_crossover',
      difference: 0.5 / Math.SQRT2,
      within_subject_sd: 1,
      power: 0.8,
    };
    expect(estimates(plan)).toMatchObject({ n_required: 128, n_per_sequence: 64, df: 126 });
  });

  it('never has more power than the level outside the bounds, so that no number is enough', () => {
    expect(refusalOf(() => estimates({ ...equivalence, cv: 0.2, ratio: 1.25 }))).toEqual({
      code: 'out_of_range',
    });
    const { power } = estimates({ ...equivalence, cv: 0.2, ratio: 1.25, n: 200, power: undefined });
    expect(power).toBeLessThanOrEqual(0.05 + 1e-12);
    expect(power).toBeGreaterThan(0.049);
  });

  it.each([{ cv: 0.3 }, { cv: 0.3, ratio: 1, difference: 1 }, { cv: 0.3, ratio: 1, equivalence_lower: 2 }])(
    'refuses quantities that do not fit together: %j',
    (quantities) => {
      expect(refusalOf(() => estimates({ ...equivalence, ...quantities }))).toEqual({ code: 'invalid_plan' });
    },
  );
});
