import { describe, expect, it } from 'vitest';
import { analyse } from './analyse.ts';
import { methodNames } from './core/plan.ts';
import { methods } from './methods/registry.ts';
import { analyseLong, csvOf, longCsv, refusalOf } from './testing/data.ts';

const columns = { outcome: 'value', subject: 'subject', condition: 'condition', levels: ['x', 'y'] };
const paired = { method: 'paired_t', ...columns };
const good = longCsv({ x: [1, 2, 4.5], y: [1.5, 1, 2] });
const header = ['subject', 'condition', 'value'];

describe('analyse', () => {
  it('has every method of the contract', () => {
    expect(Object.keys(methods).sort()).toEqual([...methodNames].sort());
  });

  it('answers the same bytes twice, also with random numbers', () => {
    const plan = { ...paired, method: 'bootstrap_ci', resamples: 500, seed: 9 };
    expect(JSON.stringify(analyse(plan, good))).toBe(JSON.stringify(analyse(plan, good)));
    expect(analyse({ ...plan, seed: 10 }, good).estimates).not.toEqual(analyse(plan, good).estimates);
  });

  it('lists dropped subjects in order of first appearance in the file, used row or not', () => {
    const csv = csvOf(header, [
      ['late', 'other', 1],
      ['early', 'x', 1],
      ['late', 'x', 2],
      ['a', 'x', 1],
      ['a', 'y', 2],
      ['b', 'x', 3],
      ['b', 'y', 1],
    ]);
    expect(analyse(paired, csv).dropped.map((entry) => entry.subject)).toEqual(['late', 'early']);
  });

  it('takes an effect for the first level minus the second', () => {
    expect(analyse(paired, good).estimates['mean_difference']).toBeCloseTo(1, 15);
    expect(analyse({ ...paired, levels: ['y', 'x'] }, good).estimates['mean_difference']).toBeCloseTo(-1, 15);
  });
});

describe('refusals', () => {
  const refused = (plan: object, csv: string | null) => refusalOf(() => analyse(plan, csv));
  const rows = (...list: (string | number | null)[][]) => csvOf(header, list);
  const two = [
    ['a', 'x', 1],
    ['a', 'y', 2],
    ['b', 'x', 3],
  ];

  it.each<[string, object, string | null, object]>([
    ['a plan that is no object', [], good, { code: 'invalid_plan' }],
    [
      'levels of no condition',
      { method: 'repeatability', outcome: 'value', subject: 'subject', levels: ['x'] },
      good,
      { code: 'invalid_plan' },
    ],
    ['an open quote', paired, 'subject,condition,value\n"a,x,1', { code: 'malformed_csv' }],
    ['no data row', paired, 'subject,condition,value\n', { code: 'empty_data' }],
    ['no data at all', paired, null, { code: 'empty_data' }],
    [
      'a column that is not there',
      { ...paired, outcome: 'flow' },
      good,
      { code: 'unknown_column', column: 'flow' },
    ],
    [
      'an unknown column that the method would not read',
      { ...paired, period: 'day' },
      good,
      { code: 'unknown_column', column: 'day' },
    ],
    [
      'text among numbers, also in a row that is not used',
      paired,
      rows(...two, ['b', 'y', 1], ['c', 'other', 'NA']),
      { code: 'non_numeric_cell', column: 'value', row: 6 },
    ],
    [
      'a value without logarithm, also in a row that is not used',
      { ...paired, transform: 'log' },
      rows(...two, ['c', 'other', 0]),
      { code: 'non_positive_value', column: 'value', row: 5 },
    ],
    [
      'an empty subject',
      paired,
      rows(...two, ['', 'y', 2]),
      { code: 'missing_key', column: 'subject', row: 5 },
    ],
    [
      'an empty condition',
      paired,
      rows(...two, ['b', '', 2]),
      { code: 'missing_key', column: 'condition', row: 5 },
    ],
    [
      'a level that does not occur',
      { ...paired, levels: ['x', 'z'] },
      good,
      { code: 'level_missing', column: 'condition', level: 'z' },
    ],
    [
      'a single level to compare',
      { method: 'icc', outcome: 'value', subject: 'subject', condition: 'condition' },
      rows(['a', 'x', 1], ['b', 'x', 2]),
      { code: 'level_missing' },
    ],
    [
      'two rows for a cell',
      paired,
      rows(...two, ['b', 'y', 1], ['a', 'x', null]),
      { code: 'duplicate_cell' },
    ],
    ['one complete pair', paired, rows(...two), { code: 'too_few_subjects' }],
    [
      'differences that are all 0.1',
      paired,
      longCsv({ x: [1.3, 2.3], y: [1.2, 2.2] }),
      { code: 'zero_variance' },
    ],
    [
      'differences that are all zero',
      { ...paired, method: 'wilcoxon_signed_rank' },
      longCsv({ x: [0.3, 2], y: [0.3, 2] }),
      { code: 'no_nonzero_differences' },
    ],
    [
      'a p-value above one',
      { method: 'multiplicity', outcome: 'p' },
      'p\n0.1\n1.5\n',
      { code: 'out_of_range', column: 'p', row: 3 },
    ],
    [
      'a power that no effect reaches',
      { method: 'power_paired_t', n: 5, power: 0.04 },
      null,
      { code: 'out_of_range' },
    ],
    [
      'replicates that are not there',
      { ...paired, method: 'bland_altman', design: 'replicated_constant' },
      good,
      { code: 'too_few_replicates' },
    ],
    [
      'two doses',
      { method: 'dose_response', outcome: 'v', dose: 'd' },
      'd,v\n0,1\n1,2\n0,1\n1,3',
      { code: 'too_few_doses' },
    ],
    [
      'an accelerating curve as a saturating one',
      { method: 'dose_response', outcome: 'v', dose: 'd' },
      'd,v\n0,1\n1,2\n2,4\n3,8\n4,16',
      { code: 'no_convergence' },
    ],
    [
      'more values than the test of normality is made for',
      { method: 'shapiro_wilk', outcome: 'v', subject: 's' },
      csvOf(
        ['s', 'v'],
        Array.from({ length: 5001 }, (_, i) => [i, (i * 7919) % 5003]),
      ),
      { code: 'too_many_subjects' },
    ],
    [
      'a subject in two groups',
      { method: 'mixed_anova', outcome: 'v', subject: 's', within: ['w'], between: ['g'] },
      's,w,g,v\na,1,m,1\na,2,f,2\nb,1,m,1\nb,2,m,2',
      { code: 'inconsistent_between', subject: 'a' },
    ],
    [
      'a subject with two sequences',
      {
        method: 'crossover_2x2',
        outcome: 'v',
        subject: 's',
        condition: 't',
        levels: ['A', 'B'],
        period: 'p',
        sequence: 'q',
      },
      's,t,p,q,v\na,A,1,AB,1\na,B,2,BA,2\nb,B,1,BA,1\nb,A,2,BA,2',
      { code: 'inconsistent_sequence', subject: 'a' },
    ],
  ])('names the fault: %s', (_, plan, csv, error) => {
    expect(refused(plan, csv)).toEqual(error);
  });

  it('checks plan, file, columns, numbers, sign, keys, levels, duplicates, completeness, variance in this order', () => {
    const log = { ...paired, transform: 'log' };
    const faults = {
      levels: { ...log, levels: ['x', 'z'] },
      column: { ...log, levels: ['x', 'z'], outcome: 'flow' },
    };
    expect(refused({ ...faults.column, confidence: 2 }, '"')).toEqual({ code: 'invalid_plan' });
    expect(refused(faults.column, '"')).toEqual({ code: 'malformed_csv' });
    expect(refused(faults.column, rows(['', 'x', 'text']))).toMatchObject({ code: 'unknown_column' });
    expect(refused(faults.levels, rows(['a', 'x', -1], ['', 'x', 'text']))).toMatchObject({
      code: 'non_numeric_cell',
    });
    expect(refused(faults.levels, rows(['', 'x', 1], ['a', 'x', -1]))).toMatchObject({
      code: 'non_positive_value',
    });
    expect(refused(faults.levels, rows(['a', 'x', 1], ['a', 'x', 1], ['', 'x', 1]))).toMatchObject({
      code: 'missing_key',
    });
    expect(refused(faults.levels, rows(['a', 'x', 1], ['a', 'x', 1]))).toMatchObject({
      code: 'level_missing',
    });
    expect(refused(log, rows(['a', 'x', 1], ['a', 'x', 1], ['a', 'y', 1]))).toEqual({
      code: 'duplicate_cell',
    });
    expect(refused(log, rows(['a', 'x', 1], ['a', 'y', 1]))).toEqual({ code: 'too_few_subjects' });
    expect(refused(log, longCsv({ x: [1, 2], y: [1, 2] }))).toEqual({ code: 'zero_variance' });
  });

  it('reads labels as text: 01 is not 1', () => {
    expect(refused({ ...paired, levels: ['1', '2'] }, longCsv({ '01': [1, 2], '2': [2, 4] }))).toMatchObject({
      code: 'level_missing',
      level: '1',
    });
  });
});

describe('accuracy', () => {
  it('keeps a p-value of 1e-100 and differences at an offset of 1e8', () => {
    const x = Array.from({ length: 40 }, (_, i) => 50 + (i % 5));
    const y = x.map((value, i) => value - 20 - (i % 2) / 512);
    const near = analyseLong({ method: 'paired_t' }, { x, y });
    const far = analyseLong({ method: 'paired_t' }, { x: x.map((v) => v + 1e8), y: y.map((v) => v + 1e8) });
    expect(near.estimates['p_value']).toBeLessThan(1e-150);
    expect(near.estimates['p_value']).toBeGreaterThan(0);
    for (const key of ['t', 'sd_difference', 'ci_lower', 'cohen_dz']) {
      expect(far.estimates[key]! / near.estimates[key]!).toBeCloseTo(1, 12);
    }
  });

  it('does not depend on a scale of 1e-9', () => {
    const x = [5.1, 6.2, 4.8, 7.7];
    const y = [4.9, 5.2, 5.1, 6];
    const tiny = (values: number[]) => values.map((value) => Number(`${value}e-9`));
    const one = analyseLong({ method: 'wilcoxon_signed_rank' }, { x, y }).estimates;
    const other = analyseLong({ method: 'wilcoxon_signed_rank' }, { x: tiny(x), y: tiny(y) }).estimates;
    expect(other['sum_positive_ranks']).toBe(one['sum_positive_ranks']);
    expect(other['pseudomedian']! / one['pseudomedian']!).toBeCloseTo(1e-9, 20);
  });
});
