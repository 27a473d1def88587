import { describe, expect, it } from 'vitest';
import reference from '../../reference/statistics/variance-orthodont.json' with { type: 'json' };
import { analyse } from '../analyse.ts';
import { failureOf, orthodontCsv } from './orthodont.test-support.ts';

type Numbers = Record<string, number>;

const change = {
  method: 'ancova_change',
  outcome: 'value',
  subject: 'subject',
  condition: 'time',
  levels: ['post', 'pre'],
};

interface Subject {
  pre: number | '';
  post: number | '';
  group?: string;
  weight?: number | '';
}

function changeCsv(subjects: readonly Subject[]): string {
  const rows = subjects.flatMap(({ pre, post, group = '', weight = '' }, i) => [
    `s${i},${group},${weight},pre,${pre}`,
    `s${i},${group},${weight},post,${post}`,
  ]);
  return ['subject,group,weight,time,value', ...rows].join('\n');
}

function expectClose(got: Record<string, unknown>, expected: Numbers): void {
  for (const [key, value] of Object.entries(expected)) {
    expect(
      Math.abs((got[key] as number) / value - 1),
      `${key}: ${String(got[key])}, not ${value}`,
    ).toBeLessThan(1e-9);
  }
}

describe('change from baseline', () => {
  it('agrees with R on the distances at 14 from those at 8 (Potthoff and Roy 1964)', () => {
    const plan = { ...change, condition: 'age', levels: ['14', '8'] };
    expectClose(analyse(plan, orthodontCsv()).estimates, reference.ancova);
    const bySex = analyse({ ...plan, between: ['sex'] }, orthodontCsv());
    expectClose(bySex.estimates, reference.ancova_by_sex);
    expect(bySex.tables['pairwise']).toHaveLength(1);
    expect(bySex.tables['pairwise']![0]!['estimate']).toBeCloseTo(
      reference.ancova_by_sex['adjusted_difference'],
      11,
    );
  });

  it('fits a straight line as by hand', () => {
    // pre 0..3, post 1, 3, 4, 8: slope 2.2, intercept at the mean 4, RSS 1.8 on 2 df.
    const csv = changeCsv([1, 3, 4, 8].map((post, pre) => ({ pre, post })));
    const { estimates, tables } = analyse(change, csv);
    expect(estimates['baseline_slope']).toBeCloseTo(2.2, 13);
    expect(estimates['change_on_baseline_slope']).toBeCloseTo(1.2, 13);
    expect(estimates['adjusted_mean_change']).toBeCloseTo(2.5, 13);
    expect(estimates['adjusted_mean_change_se']).toBeCloseTo(Math.sqrt(0.9 / 4), 13);
    expect(estimates['residual_sd']).toBeCloseTo(Math.sqrt(0.9), 13);
    expect(estimates['r_squared']).toBeCloseTo(24.2 / 26, 13);
    expect(tables).toEqual({});
  });

  const grouped: Subject[] = [
    { pre: 1, post: 2.5, group: 'x', weight: 60 },
    { pre: 2, post: 3, group: 'x', weight: 71 },
    { pre: 4, post: 5.5, group: 'x', weight: 64 },
    { pre: 2, post: 1, group: 'y', weight: 80 },
    { pre: 3, post: 3.5, group: 'y', weight: 66 },
    { pre: 6, post: 5, group: 'y', weight: 75 },
  ];

  it('has the squared t test of the difference as the F test of two groups', () => {
    const plan = { ...change, between: ['group'], covariates: ['weight'] };
    const { estimates, tables } = analyse(plan, changeCsv(grouped));
    expect(estimates['group_f']).toBeCloseTo(estimates['t']! ** 2, 11);
    expect(estimates['group_p']).toBeCloseTo(estimates['p_value']!, 12);
    const [x, y] = tables['adjusted_means'] as [Numbers, Numbers];
    expect(x['adjusted_mean']! - y['adjusted_mean']!).toBeCloseTo(estimates['adjusted_difference']!, 12);
    expect(estimates).toMatchObject({
      group_df_1: 1,
      group_df_2: 2,
      slope_homogeneity_df_1: 1,
      slope_homogeneity_df_2: 1,
    });
  });

  it('is indifferent to a shift of 1e8 and to the unit of the covariate', () => {
    const plan = { ...change, between: ['group'], covariates: ['weight'] };
    const plain = analyse(plan, changeCsv(grouped)).estimates;
    const moved = grouped.map((s) => ({
      ...s,
      pre: Number(s.pre) + 1e8,
      post: Number(s.post) + 1e8,
      weight: Number(s.weight) * 1e-6,
    }));
    const shifted = analyse(plan, changeCsv(moved)).estimates;
    for (const key of [
      'group_f',
      'baseline_slope',
      'adjusted_difference',
      'slope_homogeneity_f',
      'r_squared',
    ]) {
      expect(shifted[key]! / plain[key]!, key).toBeCloseTo(1, 9);
    }
  });

  it('names the reason that comes first: incomplete, group, covariate', () => {
    const csv = changeCsv([
      ...grouped,
      { pre: 3, post: '', group: '', weight: '' },
      { pre: 3, post: 3, group: '', weight: '' },
      { pre: 3, post: 3, group: 'x', weight: '' },
      { pre: 3, post: 3, group: 'z', weight: '' },
    ]);
    const plan = {
      ...change,
      between: ['group'],
      factor_levels: { group: ['x', 'y'] },
      covariates: ['weight'],
    };
    expect(analyse(plan, csv).dropped).toEqual([
      { subject: 's6', reason: 'incomplete' },
      { subject: 's7', reason: 'missing_between' },
      { subject: 's8', reason: 'missing_covariate' },
    ]);
  });

  it('refuses a constant baseline, a covariate that repeats another, and one that varies within a subject', () => {
    const constant = changeCsv(grouped.map((s) => ({ ...s, pre: 2 })));
    expect(failureOf(() => analyse(change, constant))).toEqual({ code: 'zero_variance' });
    const repeated = changeCsv(grouped.map((s) => ({ ...s, weight: 3 * Number(s.pre) - 1 })));
    expect(failureOf(() => analyse({ ...change, covariates: ['weight'] }, repeated))).toEqual({
      code: 'invalid_plan',
    });
    const varying = changeCsv(grouped).replace('s2,x,64,post', 's2,x,65,post');
    expect(failureOf(() => analyse({ ...change, covariates: ['weight'] }, varying))).toEqual({
      code: 'inconsistent_between',
      subject: 's2',
    });
  });

  it('needs three subjects, two in each group, and one more than there are coefficients', () => {
    const code = { code: 'too_few_subjects' };
    expect(failureOf(() => analyse(change, changeCsv(grouped.slice(0, 2))))).toEqual(code);
    expect(
      failureOf(() => analyse({ ...change, between: ['group'] }, changeCsv(grouped.slice(0, 4)))),
    ).toEqual(code);
    expect(
      failureOf(() => analyse({ ...change, covariates: ['weight'] }, changeCsv(grouped.slice(0, 3)))),
    ).toEqual(code);
  });
});

describe('allometric scaling', () => {
  const plan = { method: 'allometric_scaling', outcome: 'peak', subject: 'subject', covariates: ['rest'] };
  // Logs of rest 0..3, of peak 1, 3, 4, 8: the straight line above.
  const rows = [1, 3, 4, 8].map((peak, rest) => `s${rest},${Math.exp(rest)},${Math.exp(peak)}`);
  const csv = ['subject,rest,peak', ...rows].join('\n');

  it('is a straight line of logarithms', () => {
    const { estimates } = analyse(plan, csv);
    expect(estimates['exponent']).toBeCloseTo(2.2, 12);
    expect(estimates['exponent_se']).toBeCloseTo(Math.sqrt(0.9 / 5), 12);
    expect(estimates['log_intercept']).toBeCloseTo(0.7, 12);
    expect(estimates['log_intercept_se']).toBeCloseTo(Math.sqrt(0.9 * 0.7), 12);
    expect(estimates['t_exponent_one']).toBeCloseTo(1.2 / Math.sqrt(0.18), 11);
    expect(estimates['scale_factor']).toBeCloseTo(Math.exp(0.7), 12);
  });

  it('keeps the exponent when both are measured in other units', () => {
    const scaled = [
      'subject,rest,peak',
      ...[1, 3, 4, 8].map((peak, rest) => `s${rest},${5 * Math.exp(rest)},${7e-6 * Math.exp(peak)}`),
    ];
    const { estimates } = analyse(plan, scaled.join('\n'));
    expect(estimates['exponent']).toBeCloseTo(2.2, 11);
    expect(estimates['percent_change_baseline_p']).toBeLessThan(1);
  });

  const conditions = ['control', 'drug'];
  const visits = [
    [3.1, 9.4, 2.7, 9.9],
    [4.4, 11.2, 4.1, 13.1],
    [2.2, 7.3, 2.9, 9.1],
    [5.3, 12.6, 4.9, 15],
    [3.6, 10.9, 3.3, 10.4],
  ].flatMap(([r1, p1, r2, p2], i) => [
    [`s${i}`, conditions[0], r1, p1] as const,
    [`s${i}`, conditions[1], r2, p2] as const,
  ]);

  it('is the mixed model of the log ratio when conditions are compared', () => {
    const byCondition = ['subject,condition,rest,peak', ...visits.map((row) => row.join(','))].join('\n');
    const { estimates, tables } = analyse({ ...plan, condition: 'condition' }, byCondition);
    const logs = visits.map(([s, c, rest, peak]) =>
      [s, c, Math.log(rest!), Math.log(peak! / rest!)].join(','),
    );
    const model = analyse(
      {
        method: 'linear_mixed_model',
        outcome: 'ratio',
        subject: 'subject',
        fixed: ['rest', 'condition'],
        factors: ['condition'],
        marginal_means: { factor: 'condition' },
      },
      ['subject,condition,rest,ratio', ...logs].join('\n'),
    );
    const slope = model.tables['fixed_effects']![1]! as Numbers;
    expect(estimates['exponent']).toBeCloseTo(slope['estimate']! + 1, 10);
    expect(estimates['exponent_df']).toBeCloseTo(slope['df']!, 6);
    expect(estimates['p_exponent_one']).toBeCloseTo(slope['p_value']!, 9);
    const [control] = tables['adjusted_means'] as [Numbers];
    const [mean] = model.tables['marginal_means'] as [Numbers];
    expect(control['log_ratio']).toBeCloseTo(mean['adjusted_mean']!, 10);
    expect(control['percent_change_ci_upper']).toBeCloseTo(100 * Math.expm1(mean['ci_upper']!), 6);
    expect(tables['pairwise']![0]).toMatchObject({ level_1: 'control', level_2: 'drug' });
  });

  it('refuses values that are not positive, second rows and a constant baseline', () => {
    expect(failureOf(() => analyse(plan, `${csv}\ns9,-1,2`))).toEqual({
      code: 'non_positive_value',
      column: 'rest',
      row: 6,
    });
    expect(failureOf(() => analyse(plan, `${csv}\ns0,1,2`))).toEqual({ code: 'duplicate_cell' });
    const constant = 'subject,rest,peak\na,2,3\nb,2,4\nc,2,6';
    expect(failureOf(() => analyse(plan, constant))).toEqual({ code: 'zero_variance' });
  });
});
