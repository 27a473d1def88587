import { describe, expect, it } from 'vitest';
import reference from '../../reference/statistics/variance-orthodont.json' with { type: 'json' };
import { analyse } from '../analyse.ts';
import { failureOf, orthodontCsv } from './orthodont.test-support.ts';

type Numbers = Record<string, number>;

function expectClose(got: Record<string, unknown>, expected: Numbers): void {
  for (const [key, value] of Object.entries(expected)) {
    expect(
      Math.abs((got[key] as number) / value - 1),
      `${key}: ${String(got[key])}, not ${value}`,
    ).toBeLessThan(1e-9);
  }
}

const oneWay = { method: 'one_way_rm_anova', outcome: 'value', subject: 'subject', condition: 'condition' };
const twoWay = { method: 'two_way_rm_anova', outcome: 'value', subject: 'subject', within: ['a', 'b'] };
const mixed = {
  method: 'mixed_anova',
  outcome: 'value',
  subject: 'subject',
  within: ['time'],
  between: ['group'],
};

/** A data file in long form from values by subject and condition. */
function longCsv(values: readonly (readonly (number | string)[])[], conditions = 'xyzw'): string {
  const rows = values.flatMap((row, i) => row.map((value, j) => `s${i},${conditions[j]},${value}`));
  return ['subject,condition,value', ...rows].join('\n');
}

describe('one-way repeated measures', () => {
  it('agrees with R on the distances of Potthoff and Roy (1964)', () => {
    const plan = { ...oneWay, condition: 'age', adjust: 'bonferroni' };
    const { estimates, tables } = analyse(plan, orthodontCsv());
    expectClose(estimates, reference.one_way_rm_anova);
    reference.pairwise.forEach((row, i) => expectClose(tables['pairwise']![i]!, row));
    expect(tables['anova']![0]).toMatchObject({ effect: 'age', f: estimates['f'] });
  });

  it('is the squared paired t test for two levels', () => {
    // Differences 1, 2, 3, 6: mean 3, SD sqrt(14/3), t = 3/sqrt(14/12), t² = 9 · 12/14.
    const csv = longCsv([
      [5, 4],
      [8, 6],
      [4, 1],
      [9, 3],
    ]);
    const { estimates } = analyse(oneWay, csv);
    expect(estimates['f']).toBeCloseTo(54 / 7, 12);
    expect(estimates).toMatchObject({
      df_effect: 1,
      df_error: 3,
      gg_epsilon: 1,
      hf_epsilon: 1,
      mauchly_w: null,
      mauchly_p: null,
    });
    expect(estimates['p_gg']).toBe(estimates['p_value']);
  });

  it('splits the sums of squares as by hand', () => {
    // Rows 1 2 3, 2 4 3, 3 3 6: grand mean 3, levels 2 3 4, subjects 2 3 4.
    // SS levels 6, subjects 6, total 1·4 + 1 + 0 + 1 + 1 + 0 + 0 + 0 + 9 = 16, error 4.
    const { estimates } = analyse(
      oneWay,
      longCsv([
        [1, 2, 3],
        [2, 4, 3],
        [3, 3, 6],
      ]),
    );
    expect(estimates['ss_effect']).toBeCloseTo(6, 12);
    expect(estimates['ss_subject']).toBeCloseTo(6, 12);
    expect(estimates['ss_error']).toBeCloseTo(4, 12);
    expect(estimates['f']).toBeCloseTo(3, 12);
    expect(estimates['partial_eta_squared']).toBeCloseTo(0.6, 12);
    expect(estimates['generalised_eta_squared']).toBeCloseTo(6 / 16, 12);
  });

  it('keeps its digits beside 1e8 and at 1e-9', () => {
    const values = [
      [1, 2, 3.5],
      [2, 4, 3],
      [3, 3, 6],
      [1.5, 2, 2],
    ];
    const plain = analyse(oneWay, longCsv(values)).estimates;
    for (const change of [(v: number) => v + 1e8, (v: number) => v * 1e-9]) {
      const changed = analyse(oneWay, longCsv(values.map((row) => row.map(change)))).estimates;
      for (const key of ['f', 'p_value', 'gg_epsilon', 'hf_epsilon', 'mauchly_w', 'mauchly_p']) {
        expect(changed[key]! / plain[key]!, key).toBeCloseTo(1, 9);
      }
    }
  });

  it('has no test of sphericity with fewer subjects than levels, and says so', () => {
    const { estimates, warnings } = analyse(
      oneWay,
      longCsv([
        [1, 2, 3.5, 1],
        [2, 4, 3, 2],
        [3, 3, 6, 1],
      ]),
    );
    expect(estimates['mauchly_w']).toBeNull();
    expect(estimates['gg_epsilon']).toBeGreaterThan(1 / 3);
    expect(warnings.map(({ code }) => code)).toEqual(['sphericity_test_not_available']);
  });

  it('has no corrected test where the estimate of Huynh and Feldt does not exist', () => {
    const { estimates } = analyse(
      oneWay,
      longCsv([
        [1, 2, 3],
        [2, 4, 3],
      ]),
    );
    expect(estimates).toMatchObject({ hf_epsilon: null, df_effect_hf: null, df_error_hf: null, p_hf: null });
  });

  it('leaves incomplete subjects out and compares pairs that do not vary without a test', () => {
    const csv = longCsv([
      [1, 2, 5],
      [2, 3, 6.5],
      ['', 3, 3],
      [4, 5, 8],
    ]);
    const result = analyse(oneWay, csv);
    expect(result.n).toBe(3);
    expect(result.dropped).toEqual([{ subject: 's2', reason: 'incomplete' }]);
    expect(result.tables['pairwise']![0]).toEqual({
      level_1: 'x',
      level_2: 'y',
      mean_difference: -1,
      sd_difference: 0,
      standard_error: 0,
      ci_lower: null,
      ci_upper: null,
      t: null,
      df: 2,
      p_value: null,
      p_adjusted: null,
    });
    // Two tests are left for Holm's correction: the smaller p-value counts twice.
    const [second, third] = result.tables['pairwise']!.slice(1) as [Numbers, Numbers];
    const smaller = second['p_value']! < third['p_value']! ? second : third;
    expect(smaller['p_adjusted']).toBeCloseTo(2 * smaller['p_value']!, 14);
  });

  it('refuses values that subject and level explain, although their decimals do not add up exactly', () => {
    const csv = longCsv([
      [0.1, 0.3, 0.4],
      [0.7, 0.9, 1.0],
    ]);
    expect(failureOf(() => analyse(oneWay, csv))).toEqual({ code: 'zero_variance' });
  });

  it('refuses one level, one complete subject and a second row of a cell', () => {
    expect(failureOf(() => analyse(oneWay, longCsv([[1], [2]])))).toEqual({ code: 'level_missing' });
    expect(
      failureOf(() =>
        analyse(
          oneWay,
          longCsv([
            [1, 2],
            [2, ''],
          ]),
        ),
      ),
    ).toEqual({ code: 'too_few_subjects' });
    expect(
      failureOf(() =>
        analyse(
          oneWay,
          `${longCsv([
            [1, 2],
            [2, 5],
          ])}\ns0,x,`,
        ),
      ),
    ).toEqual({ code: 'duplicate_cell' });
  });
});

describe('two-way repeated measures', () => {
  // 2 × 2: each effect is the squared t test of one contrast of the four cells.
  const cells = [
    [3, 5, 4, 9],
    [2, 6, 5, 7],
    [6, 7, 4, 12],
    [1, 4, 3, 4],
    [5, 5, 6, 8],
  ];
  const csv = [
    'subject,a,b,value',
    ...cells.flatMap((row, i) =>
      row.map((value, j) => `s${i},${j < 2 ? 'a1' : 'a2'},${j % 2 === 0 ? 'b1' : 'b2'},${value}`),
    ),
  ].join('\n');

  function squaredT(weights: readonly number[]): number {
    const d = cells.map((row) => row.reduce((sum, value, j) => sum + weights[j]! * value, 0));
    const mean = d.reduce((sum, value) => sum + value, 0) / d.length;
    const variance = d.reduce((sum, value) => sum + (value - mean) ** 2, 0) / (d.length - 1);
    return (mean * mean) / (variance / d.length);
  }

  it('tests each effect against its own error', () => {
    const anova = analyse(twoWay, csv).tables['anova']!;
    expect(anova.map((row) => row['effect'])).toEqual(['a', 'b', 'a × b']);
    expect(anova[0]!['f']).toBeCloseTo(squaredT([1, 1, -1, -1]), 11);
    expect(anova[1]!['f']).toBeCloseTo(squaredT([1, -1, 1, -1]), 11);
    expect(anova[2]!['f']).toBeCloseTo(squaredT([1, -1, -1, 1]), 11);
  });

  it('lists cells with the first factor slowest and compares subject means over the other factor', () => {
    const { tables } = analyse(twoWay, csv);
    expect(tables['cell_means']!.map((row) => [row['a'], row['b'], row['mean']])).toEqual([
      ['a1', 'b1', 3.4],
      ['a1', 'b2', 5.4],
      ['a2', 'b1', 4.4],
      ['a2', 'b2', 8],
    ]);
    const [a, b] = tables['pairwise'] as [Record<string, unknown>, Record<string, unknown>];
    expect(a).toMatchObject({ factor: 'a', level_1: 'a1', level_2: 'a2', df: 4 });
    expect(a['mean_difference']).toBeCloseTo(4.4 - 6.2, 12);
    expect(b['mean_difference']).toBeCloseTo(3.9 - 6.7, 12);
  });

  it('refuses an error sum of squares of zero', () => {
    const additive = csv.replace(
      /^(s(\d),a(\d),b(\d)),.*$/gm,
      (_line, key: string, s: string, a: string, b: string) => {
        return `${key},${(Number(s) + 0.1 * Number(a) * Number(s) + 0.3 * Number(b)).toFixed(1)}`;
      },
    );
    expect(failureOf(() => analyse(twoWay, additive))).toEqual({ code: 'zero_variance' });
  });
});

describe('mixed analysis of variance', () => {
  it('agrees with R on the distances of Potthoff and Roy (1964), boys and girls', () => {
    const plan = { ...mixed, within: ['age'], between: ['sex'] };
    const { tables, estimates } = analyse(plan, orthodontCsv());
    expect(estimates).toEqual({ n_groups: 2 });
    const [sex, age, interaction] = tables['anova'] as [Numbers, Numbers, Numbers];
    expectClose(sex, reference.mixed_anova.sex);
    expectClose(age, reference.mixed_anova.age);
    expectClose(interaction, reference.mixed_anova.interaction);
    expect(sex['gg_epsilon']).toBeNull();
  });

  const csv = [
    'subject,group,time,value',
    ...[
      ['a', 'x', 1, 4],
      ['b', 'x', 2, 3],
      ['c', 'x', 5, 9],
      ['d', 'y', 2, 2],
      ['e', 'y', 3, 7],
      ['f', '', 3, ''],
      ['g', 'y', 3, ''],
      ['h', 'z', 1, 8],
    ].flatMap(([subject, group, pre, post]) => [
      `${subject},${group},pre,${pre}`,
      `${subject},${group},post,${post}`,
    ]),
  ].join('\n');
  const plan = { ...mixed, factor_levels: { group: ['x', 'y'] } };

  it('names subjects without a group before incomplete ones, and does not mention groups that are not listed', () => {
    const result = analyse(plan, csv);
    expect(result.n).toBe(5);
    expect(result.dropped).toEqual([
      { subject: 'f', reason: 'missing_between' },
      { subject: 'g', reason: 'incomplete' },
    ]);
    expect(result.tables['cell_means']!.map((row) => [row['group'], row['time'], row['n']])).toEqual([
      ['x', 'pre', 3],
      ['x', 'post', 3],
      ['y', 'pre', 2],
      ['y', 'post', 2],
    ]);
  });

  it('refuses a subject in two groups, and a group of one', () => {
    const moved = csv.replace('b,x,post', 'b,y,post');
    expect(failureOf(() => analyse(plan, moved))).toEqual({ code: 'inconsistent_between', subject: 'b' });
    expect(failureOf(() => analyse(mixed, csv))).toEqual({ code: 'too_few_subjects' });
  });
});
