import { describe, expect, it } from 'vitest';
import { leastSquares } from '../../numerics/linear-algebra-least-squares.ts';
import { analyse } from '../analyse.ts';
import { failureOf } from './orthodont.test-support.ts';

const plan = {
  method: 'crossover_2x2',
  outcome: 'after',
  subject: 'subject',
  condition: 'treatment',
  levels: ['A', 'B'],
  period: 'period',
  period_levels: ['1', '2'],
};

type Visits = readonly [
  order: 'AB' | 'BA',
  after: readonly (number | '')[],
  before?: readonly (number | '')[],
];

function csvOf(
  subjects: readonly Visits[],
  label: (order: string, subject: number) => string = (order) => order,
): string {
  const rows = subjects.flatMap(([order, after, before = [1, 2]], i) =>
    after.map((value, p) => [`s${i + 1}`, label(order, i), p + 1, order[p], before[p], value].join(',')),
  );
  return ['subject,sequence,period,treatment,before,after', ...rows].join('\n');
}

// Period differences: AB 3, 4; BA -3, -2. Sums: AB 17, 20; BA 15, 16.
const four: Visits[] = [
  ['AB', [10, 7]],
  ['AB', [12, 8]],
  ['BA', [6, 9]],
  ['BA', [7, 9]],
];

// Baseline differences vary within the orders.
const withBaseline: Visits[] = [
  ['AB', [10, 7], [5, 4.5]],
  ['AB', [12, 8], [6, 4]],
  ['AB', [9, 8.5], [4, 5]],
  ['BA', [6, 9], [3, 6]],
  ['BA', [7, 9], [5, 5.5]],
  ['BA', [8, 11], [4, 4]],
];

describe('2 × 2 cross-over', () => {
  it('gives treatment, period and carry-over as by hand', () => {
    const { estimates, n } = analyse(plan, csvOf(four));
    expect(n).toBe(4);
    expect(estimates).toMatchObject({ n_ab: 2, n_ba: 2, treatment_df: 2 });
    expect(estimates['treatment_effect']).toBeCloseTo(3, 13);
    expect(estimates['treatment_se']).toBeCloseTo(Math.sqrt(0.125), 13);
    expect(estimates['treatment_t']).toBeCloseTo(3 / Math.sqrt(0.125), 12);
    expect(estimates['period_effect']).toBeCloseTo(0.5, 13);
    expect(estimates['carryover_effect']).toBeCloseTo(3, 13);
    expect(estimates['carryover_se']).toBeCloseTo(Math.sqrt(2.5), 13);
  });

  it('turns the treatment effect with the order of levels, and the period effect with that of periods', () => {
    const { estimates } = analyse(plan, csvOf(four));
    const turned = analyse({ ...plan, levels: ['B', 'A'], period_levels: ['2', '1'] }, csvOf(four)).estimates;
    expect(turned['treatment_effect']).toBeCloseTo(-estimates['treatment_effect']!, 13);
    expect(turned['period_effect']).toBeCloseTo(-estimates['period_effect']!, 13);
    expect(turned['mixed_treatment_ci_lower']).toBeCloseTo(-estimates['mixed_treatment_ci_upper']!, 10);
  });

  it('gives the same treatment effect by the mixed form when every subject is complete', () => {
    const { estimates, warnings } = analyse(plan, csvOf(withBaseline));
    expect(estimates['between_subject_variance']).toBeGreaterThan(0);
    for (const key of ['effect', 'se', 't', 'df', 'p_value', 'ci_lower']) {
      expect(estimates[`mixed_treatment_${key}`]).toBeCloseTo(estimates[`treatment_${key}`]!, 7);
      expect(estimates[`mixed_period_${key}`]).toBeCloseTo(estimates[`period_${key}`]!, 7);
    }
    expect(warnings).toEqual([]);
  });

  it('uses rows of incomplete subjects in the mixed form only', () => {
    const more: Visits[] = [...withBaseline, ['BA', [7.5]], ['AB', ['', 6]]];
    const result = analyse(plan, csvOf(more));
    expect(result.n).toBe(6);
    expect(result.dropped).toEqual([
      { subject: 's7', reason: 'incomplete' },
      { subject: 's8', reason: 'incomplete' },
    ]);
    expect(result.estimates).toMatchObject({
      mixed_n_subjects: 8,
      mixed_n_observations: 14,
      n_ab: 3,
      n_ba: 3,
    });
  });

  it('adjusts for baselines by least squares of the period difference', () => {
    const { estimates } = analyse({ ...plan, baseline: 'before' }, csvOf(withBaseline));
    const difference = (position: 1 | 2) =>
      Float64Array.from(withBaseline, (row) => {
        const [first, second] = row[position] as [number, number];
        return first - second;
      });
    const order = Float64Array.from(withBaseline, ([o]) => (o === 'AB' ? 1 : -1));
    const fit = leastSquares([new Float64Array(6).fill(1), order, difference(2)], difference(1));
    const variance = fit.residualSumOfSquares / 3;
    expect(estimates['adjusted_period_effect']).toBeCloseTo(fit.coefficients[0]!, 12);
    expect(estimates['adjusted_treatment_effect']).toBeCloseTo(fit.coefficients[1]!, 12);
    expect(estimates['baseline_coefficient']).toBeCloseTo(fit.coefficients[2]!, 12);
    [0, 1, 2].forEach((i) => {
      const key = ['adjusted_period_se', 'adjusted_treatment_se', 'baseline_coefficient_se'][i]!;
      expect(estimates[key]).toBeCloseTo(Math.sqrt(variance * fit.unscaledCovariance[4 * i]!), 12);
    });
    expect(estimates['adjusted_treatment_df']).toBe(3);
  });

  it('leaves out subjects without a baseline, after incomplete ones', () => {
    const some: Visits[] = [...withBaseline, ['AB', [8, 6], [5, '']], ['BA', [7, ''], ['', '']]];
    const result = analyse({ ...plan, baseline: 'before' }, csvOf(some));
    expect(result.dropped).toEqual([
      { subject: 's7', reason: 'missing_covariate' },
      { subject: 's8', reason: 'incomplete' },
    ]);
    expect(result.estimates['mixed_n_observations']).toBe(15);
  });

  it('tests equivalence of ratios, and of adjusted ratios, against both bounds', () => {
    const bounds = { transform: 'log', equivalence_lower: 0.5, equivalence_upper: 2, baseline: 'before' };
    const { estimates } = analyse({ ...plan, ...bounds }, csvOf(withBaseline));
    for (const prefix of ['treatment_', 'adjusted_treatment_']) {
      const [effect, se] = [estimates[`${prefix}effect`]!, estimates[`${prefix}se`]!];
      expect(estimates[`${prefix}t_lower`]).toBeCloseTo((effect + Math.LN2) / se, 12);
      expect(estimates[`${prefix}t_upper`]).toBeCloseTo((effect - Math.LN2) / se, 12);
      expect(estimates[`${prefix}equivalence_ci_level`]).toBeCloseTo(0.9, 14);
      expect(estimates[`${prefix}ratio`]).toBeCloseTo(Math.exp(effect), 14);
      expect(Math.log(estimates[`${prefix}equivalence_ratio_ci_lower`]!)).toBeCloseTo(
        estimates[`${prefix}equivalence_ci_lower`]!,
        13,
      );
    }
  });

  it('lists the four cells by order and period', () => {
    const rows = analyse(plan, csvOf(four)).tables['cell_means']!;
    expect(rows.map((row) => Object.values(row).slice(0, 5))).toEqual([
      ['A', '1', 'A', 2, 11],
      ['A', '2', 'B', 2, 7.5],
      ['B', '1', 'B', 2, 6.5],
      ['B', '2', 'A', 2, 9],
    ]);
  });

  it('warns when subjects do not differ beyond their own variation', () => {
    const same: Visits[] = [
      ['AB', [5, 9]],
      ['AB', [9, 5.5]],
      ['BA', [5, 9]],
      ['BA', [9, 5]],
    ];
    const { estimates, warnings } = analyse(plan, csvOf(same));
    expect(estimates['between_subject_variance']).toBe(0);
    expect(warnings.map(({ code }) => code)).toEqual(['variance_at_boundary']);
  });
});

describe('2 × 2 cross-over, bad input', () => {
  const withSequence = { ...plan, sequence: 'sequence' };

  it('accepts one label an order, whatever it is called', () => {
    const label = (order: string) => (order === 'AB' ? 'first' : 'second');
    const onlySecondPeriod = 's5,first,2,B,1,8';
    const result = analyse(withSequence, `${csvOf(four, label)}\n${onlySecondPeriod}`);
    expect(result.n).toBe(4);
    expect(result.estimates['mixed_n_subjects']).toBe(5);
  });

  it('refuses two labels of a subject, and labels that contradict the order', () => {
    const twice = csvOf(four).replace('s2,AB,2', 's2,BA,2');
    expect(failureOf(() => analyse(withSequence, twice))).toEqual({
      code: 'inconsistent_sequence',
      subject: 's2',
    });
    const crossed = csvOf(four, (order, i) => (i === 1 ? 'BA' : order));
    expect(failureOf(() => analyse(withSequence, crossed))).toEqual({ code: 'inconsistent_sequence' });
  });

  it('refuses two rows of a subject in one period or with one treatment', () => {
    const csv = csvOf(four);
    expect(failureOf(() => analyse(plan, csv.replace('s1,AB,2,B', 's1,AB,1,B')))).toEqual({
      code: 'duplicate_cell',
    });
    expect(failureOf(() => analyse(plan, csv.replace('s1,AB,2,B', 's1,AB,2,A')))).toEqual({
      code: 'duplicate_cell',
    });
  });

  it('refuses fewer than two complete subjects of an order', () => {
    expect(failureOf(() => analyse(plan, csvOf(four.slice(1))))).toEqual({ code: 'too_few_subjects' });
  });

  it('refuses period differences, or baseline differences, that do not vary within the orders', () => {
    const constant: Visits[] = four.map(([order], i) => [order, [i + 0.3, i + (order === 'AB' ? 0.1 : 0.2)]]);
    expect(failureOf(() => analyse(plan, csvOf(constant)))).toEqual({ code: 'zero_variance' });
    expect(failureOf(() => analyse({ ...plan, baseline: 'before' }, csvOf(four)))).toEqual({
      code: 'zero_variance',
    });
  });

  it('checks the outcome before the baseline, and numbers before signs', () => {
    const csv = csvOf([['AB', [-1, 2], [0, 3]], ...four]);
    const logs = { ...plan, transform: 'log', baseline: 'before' };
    expect(failureOf(() => analyse(logs, csv))).toEqual({
      code: 'non_positive_value',
      column: 'after',
      row: 2,
    });
    expect(failureOf(() => analyse(logs, csv.replace(',3,2\n', ',x,2\n')))).toEqual({
      code: 'non_numeric_cell',
      column: 'before',
      row: 3,
    });
  });

  it('refuses bounds out of order, and a third period', () => {
    const bounds = { equivalence_lower: 1, equivalence_upper: -1 };
    expect(failureOf(() => analyse({ ...plan, ...bounds }, csvOf(four)))).toEqual({ code: 'invalid_plan' });
    const { period_levels: _levels, ...open } = plan;
    expect(failureOf(() => analyse(open, `${csvOf(four)}\ns9,AB,3,A,1,1`))).toEqual({ code: 'invalid_plan' });
  });
});
