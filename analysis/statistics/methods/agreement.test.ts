import { describe, expect, it } from 'vitest';
import { analyse } from '../analyse.ts';
import { analyseLong, csvOf } from '../testing/data.ts';

describe('bland_altman', () => {
  it('gives bias and limits by hand, and their standard error after Bland and Altman 1999', () => {
    // d = 1, 3, 2, 2: mean 2, SD √(2/3)
    const { estimates } = analyseLong(
      { method: 'bland_altman', limit_multiplier: 2 },
      { x: [2, 6, 5, 8], y: [1, 3, 3, 6] },
    );
    const sd = Math.sqrt(2 / 3);
    expect(estimates['bias']).toBe(2);
    expect(estimates['lower_limit']).toBeCloseTo(2 - 2 * sd, 14);
    expect(estimates['limit_se']).toBeCloseTo(sd * Math.sqrt(1 / 4 + 4 / 6), 14);
    expect(estimates['proportional_df']).toBe(2);
  });

  it('has no proportional bias for two pairs', () => {
    const { estimates } = analyseLong({ method: 'bland_altman' }, { x: [2, 6], y: [1, 3] });
    expect(estimates).not.toHaveProperty('proportional_slope');
  });

  const header = ['subject', 'condition', 'replicate', 'value'];
  const plan = {
    method: 'bland_altman',
    outcome: 'value',
    subject: 'subject',
    condition: 'condition',
    replicate: 'replicate',
    levels: ['x', 'y'],
  };
  const rows = [
    ['a', 'x', 1, 5],
    ['a', 'x', 2, 7],
    ['a', 'y', 1, 4],
    ['a', 'y', 2, 4],
    ['b', 'x', 1, 9],
    ['b', 'x', 2, null],
    ['b', 'y', 1, 6],
    ['b', 'y', 2, 8],
    ['c', 'x', 1, 1],
  ];

  it('adds the variance of replicates of a constant value, by hand', () => {
    // means x 6, 9; y 4, 7; differences 2, 2; s²_xw = 2/1, s²_yw = 2/2; 1 − mean(1/m): x ¼, y ½
    const { estimates, dropped, n } = analyse(
      { ...plan, design: 'replicated_constant' },
      csvOf(header, rows),
    );
    expect(estimates).toMatchObject({
      bias: 2,
      variance_mean_difference: 0,
      within_subject_variance_x: 2,
      n_observations: 7,
    });
    expect(estimates['sd_difference']).toBe(1);
    expect([n, dropped]).toEqual([2, [{ subject: 'c', reason: 'incomplete' }]]);
  });

  it('analyses linked pairs of a changing value by subject, by hand', () => {
    // pairs a: 1, 3; b: 3: bias 7/3; within 2/1; between Σm(d̄ − d̄..)² = 2/9 + 4/9; n₀ = (9 − 5)/3
    const { estimates } = analyse({ ...plan, design: 'replicated_varying' }, csvOf(header, rows));
    expect(estimates['bias']).toBeCloseTo(7 / 3, 14);
    expect(estimates['ms_within']).toBeCloseTo(2, 14);
    expect(estimates['ms_between']).toBeCloseTo(2 / 3, 14);
    expect(estimates).toMatchObject({ between_subject_variance: 0, n_observations: 3 });
  });

  it('wants the column that links pairs', () => {
    expect(() =>
      analyse({ ...plan, design: 'replicated_varying', replicate: undefined }, csvOf(header, rows)),
    ).toThrow();
  });
});

describe('icc', () => {
  it('gives the printed coefficients of Shrout and Fleiss 1979, table 4: .17, .29, .71', () => {
    const ratings = {
      J1: [9, 6, 8, 7, 10, 6],
      J2: [2, 1, 4, 1, 5, 2],
      J3: [5, 3, 6, 2, 6, 4],
      J4: [8, 2, 8, 6, 9, 7],
    };
    const { estimates } = analyseLong({ method: 'icc' }, ratings);
    expect(estimates['icc_1_1']).toBeCloseTo(0.17, 2);
    expect(estimates['icc_2_1']).toBeCloseTo(0.29, 2);
    expect(estimates['icc_3_1']).toBeCloseTo(0.71, 2);
    expect(estimates).toMatchObject({ n_raters: 4, icc_1_1_df_2: 18, icc_3_1_df_2: 15 });
    expect(estimates['ms_between']).toBeCloseTo(11.24, 2); // their table 3
    expect(estimates['ms_error']).toBeCloseTo(1.02, 2);
  });

  it('is exactly one, without limits, for raters that agree exactly', () => {
    const { estimates } = analyseLong(
      { method: 'icc' },
      { a: [3.7, 4.1, 0.3], b: [3.7, 4.1, 0.3], c: [3.7, 4.1, 0.3] },
    );
    expect(estimates).toMatchObject({
      ms_within: 0,
      ms_error: 0,
      icc_1_1: 1,
      icc_1_1_f: null,
      icc_1_1_p: 0,
      icc_2_1_ci_lower: null,
    });
  });
});

describe('repeatability', () => {
  const plan = { method: 'repeatability', outcome: 'value', subject: 'subject' };
  const csv = csvOf(
    ['subject', 'value'],
    [
      ['a', 9],
      ['a', 11],
      ['b', 20],
      ['c', 19],
      ['c', 21],
      ['c', 20],
    ],
  );

  it('pools the variance within subjects, by hand', () => {
    // a: mean 10, SS 2; c: mean 20, SS 2; 3 df; between 2·36 + 3·16 = 120 about the mean 16; n₀ = (5 − 13/5)/1
    const { estimates, dropped } = analyse(plan, csv);
    expect(estimates).toMatchObject({ n_observations: 5, mean: 16, df_within: 3 });
    expect(estimates['ms_between']).toBeCloseTo(120, 12);
    expect(estimates['within_subject_sd']).toBeCloseTo(Math.sqrt(4 / 3), 14);
    expect(estimates['repeatability_coefficient']).toBeCloseTo(1.96 * Math.sqrt(8 / 3), 14);
    expect(estimates['between_subject_sd']).toBeCloseTo(Math.sqrt((120 - 4 / 3) / 2.4), 13);
    expect(estimates['cv_root_mean_square']).toBeCloseTo(Math.sqrt((2 / 100 + 1 / 400) / 2), 14);
    expect(dropped).toEqual([{ subject: 'b', reason: 'single_measurement' }]);
  });

  it('leaves out coefficients of variation when a value is not above zero', () => {
    const { estimates, warnings } = analyse(plan, csv.replace('a,9', 'a,0'));
    expect(estimates).toMatchObject({ cv_root_mean_square: null, cv_log: null });
    expect(warnings.map((warning) => warning.code)).toEqual(['non_positive_values']);
  });
});

describe('correlation_within_subject', () => {
  const plan = { method: 'correlation_within_subject', outcome: 'y', subject: 's', covariates: ['x'] };

  it('correlates deviations from the subject means, by hand', () => {
    // deviations a: x −1, 0, 1, y −1, 1, 0; b: x ∓1, y ∓1: Sxy = 1 + 2, Sxx = 2 + 2, Syy = 2 + 2
    const csv = 's,x,y\na,1,1\na,2,3\na,3,2\nb,10,5\nb,12,7\nc,4,1\nd,5,\nd,6,1\nd,7,2\n';
    const { estimates, dropped, n } = analyse(plan, csv.replace('d,6,1\nd,7,2\n', ''));
    expect([n, estimates['n_observations'], estimates['df']]).toEqual([2, 5, 2]);
    expect(estimates['r']).toBeCloseTo(0.75, 14);
    expect(estimates['slope']).toBeCloseTo(0.75, 14);
    expect(dropped.map((entry) => entry.reason)).toEqual(['single_measurement', 'single_measurement']);
    expect(analyse(plan, csv).dropped).toEqual([
      { subject: 'c', reason: 'single_measurement' },
      { subject: 'd', reason: 'missing_value', rows: [8] },
    ]);
  });

  it('refuses a covariate that never varies within a subject', () => {
    expect(() => analyse(plan, 's,x,y\na,1,1\na,1,2\nb,2,1\nb,2,3\n')).toThrow(
      'does not vary within any subject',
    );
  });
});
