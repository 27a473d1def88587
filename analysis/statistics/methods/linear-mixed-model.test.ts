import { describe, expect, it } from 'vitest';
import { analyse } from '../analyse.ts';
import { failureOf, mixedModelReference as reference, orthodontCsv } from './orthodont.test-support.ts';

type Numbers = Record<string, number>;

/** The reference optimises and differentiates numerically; p-values multiply its errors. */
function tolerance(key: string): number {
  if (key.startsWith('p_')) return 1e-3;
  return /^df|variance|covariance|ci_/.test(key) ? 2e-5 : 5e-6;
}

function expectClose(got: Record<string, unknown>, expected: Numbers, place: string): void {
  for (const [key, value] of Object.entries(expected)) {
    const distance = Math.abs((got[key] as number) - value);
    expect(distance, `${place} ${key}: ${String(got[key])}, not ${value}`).toBeLessThanOrEqual(
      tolerance(key) * Math.abs(value) + 1e-9,
    );
  }
}

const base = { method: 'linear_mixed_model', outcome: 'value', subject: 'subject' };

describe('linear mixed model of the distances of Potthoff and Roy (1964)', () => {
  for (const { name, data, plan, estimates, tables } of reference.cases) {
    it(`agrees with R: ${name}`, () => {
      const result = analyse(plan, orthodontCsv(data === 'six_missing' ? reference.six_missing : []));
      expectClose(result.estimates, estimates, name);
      for (const [table, rows] of Object.entries(tables)) {
        expect(result.tables[table]).toHaveLength(rows.length);
        rows.forEach((row, i) => expectClose(result.tables[table]![i]!, row, `${name}, ${table}[${i}]`));
      }
    });
  }

  it('lists rows without a value by subject and keeps the others', () => {
    const result = analyse({ ...base, fixed: ['age'] }, orthodontCsv([2, 4, 9]));
    expect(result.n).toBe(27);
    expect(result.dropped).toEqual([
      { subject: 'M01', reason: 'missing_value', rows: [2, 4] },
      { subject: 'M02', reason: 'missing_value', rows: [9] },
    ]);
    expect(result.estimates['n_observations']).toBe(105);
  });

  it('names terms by level and joins interactions', () => {
    const { tables } = analyse(
      { ...base, fixed: ['sex', 'age', ['sex', 'age']], factors: ['sex'] },
      orthodontCsv(),
    );
    expect(tables['fixed_effects']!.map((row) => row['term'])).toEqual([
      'intercept',
      'sex = Female',
      'age',
      'sex = Female × age',
    ]);
    expect(tables['anova']!.map((row) => row['term'])).toEqual(['sex', 'age', 'sex × age']);
  });

  it('has no table of F tests without a fixed term', () => {
    const result = analyse(base, orthodontCsv());
    expect(Object.keys(result.tables)).toEqual(['fixed_effects', 'variance_components']);
    expect(result.estimates['n_parameters']).toBe(3);
  });

  it('ignores rows of levels that are not listed', () => {
    const plan = { ...base, fixed: ['visit'], factors: ['visit'], factor_levels: { visit: ['8', '14'] } };
    const result = analyse(plan, orthodontCsv());
    expect(result.estimates['n_observations']).toBe(54);
    expect(result.dropped).toEqual([]);
  });

  it('gives adjusted means by a second factor, slowest, and contrasts with the first level', () => {
    const plan = {
      ...base,
      fixed: ['sex', 'visit', ['sex', 'visit']],
      factors: ['sex', 'visit'],
      marginal_means: { factor: 'visit', by: 'sex', contrasts: 'versus_first' },
    };
    const { tables } = analyse(plan, orthodontCsv());
    const means = tables['marginal_means']!;
    expect(means.map((row) => [row['sex'], row['visit']])).toEqual(
      ['Male', 'Female'].flatMap((sex) => ['8', '10', '12', '14'].map((visit) => [sex, visit])),
    );
    // With a full interaction and complete data an adjusted mean is the mean of its cell: the girls at 8, 21.18.
    expect(means[4]!['adjusted_mean']).toBeCloseTo(233 / 11, 10);
    expect(tables['contrasts']!.map((row) => [row['level_1'], row['level_2']])).toEqual(
      [1, 2].flatMap(() => ['10', '12', '14'].map((visit) => [visit, '8'])),
    );
    expect(tables['contrasts']![5]!['estimate']).toBeCloseTo(265 / 11 - 233 / 11, 10);
  });
});

describe('linear mixed model, bad input', () => {
  const csv =
    'subject,time,arm,value\n' +
    ['a,0,x,1', 'a,1,x,2', 'b,0,y,2', 'b,1,y,4', 'c,0,x,3', 'c,1,x,3.5'].join('\n');

  it('refuses Kenward and Roger with maximum likelihood', () => {
    const plan = { ...base, df_method: 'kenward_roger', estimation: 'ML' };
    expect(failureOf(() => analyse(plan, csv))).toEqual({ code: 'invalid_plan' });
  });

  it('refuses a rank-deficient fixed part', () => {
    const doubled = csv
      .replace('value', 'value,twice')
      .replace(/^([abc],)(\d)(,.*)$/gm, (line, _s, t: string) => `${line},${2 * Number(t)}`);
    expect(failureOf(() => analyse({ ...base, fixed: ['time', 'twice'] }, doubled))).toEqual({
      code: 'invalid_plan',
    });
  });

  it('refuses a slope that is a factor, a repeated term and means of a column outside the model', () => {
    const bad = [
      { fixed: ['arm'], factors: ['arm'], random: { slopes: ['arm'] } },
      {
        fixed: [
          ['time', 'arm'],
          ['arm', 'time'],
        ],
        factors: ['arm'],
      },
      { fixed: ['time'], factors: ['arm'], marginal_means: { factor: 'arm' } },
      { fixed: ['arm'], factors: ['arm'], marginal_means: { factor: 'arm', by: 'arm' } },
    ];
    for (const fields of bad)
      expect(failureOf(() => analyse({ ...base, ...fields }, csv))).toEqual({ code: 'invalid_plan' });
  });

  it('refuses one row a subject, one subject, and values that follow from the subjects alone', () => {
    expect(failureOf(() => analyse(base, 'subject,value\na,1\nb,2\nc,4'))).toEqual({
      code: 'too_few_replicates',
    });
    expect(failureOf(() => analyse(base, 'subject,value\na,1\na,2\na,4'))).toEqual({
      code: 'too_few_subjects',
    });
    expect(failureOf(() => analyse(base, 'subject,value\na,1.1\na,1.1\nb,2\nb,2'))).toEqual({
      code: 'zero_variance',
    });
  });

  it('recognises that subject and time explain decimals exactly', () => {
    const exact = ['a,0,0.1', 'a,1,0.3', 'b,0,0.7', 'b,1,0.9', 'c,0,1.3', 'c,1,1.5'];
    const plan = { ...base, fixed: ['time'] };
    expect(failureOf(() => analyse(plan, `subject,time,value\n${exact.join('\n')}`))).toEqual({
      code: 'zero_variance',
    });
  });

  it('says which cell is not a number, and which level is not there', () => {
    expect(failureOf(() => analyse({ ...base, fixed: ['arm'] }, csv))).toEqual({
      code: 'non_numeric_cell',
      column: 'arm',
      row: 2,
    });
    const plan = { ...base, fixed: ['arm'], factors: ['arm'], factor_levels: { arm: ['x', 'z'] } };
    expect(failureOf(() => analyse(plan, csv))).toEqual({ code: 'level_missing', column: 'arm', level: 'z' });
  });
});
