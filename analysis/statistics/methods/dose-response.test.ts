import { describe, expect, it } from 'vitest';
import { analyse } from '../analyse.ts';
import { csvOf } from '../testing/data.ts';

const doses = [0, 1, 3, 10, 30, 100];
const curve = (f: (dose: number) => number, wobble = 0) =>
  csvOf(
    ['dose', 'value'],
    [...doses, ...doses].map((dose, i) => [dose, f(dose) + wobble * ((i % 3) - 1)]),
  );
const plan = { method: 'dose_response', outcome: 'value', dose: 'dose' };

describe('dose_response', () => {
  it('finds the parameters of a curve without noise', () => {
    const emax = analyse(
      { ...plan, model: 'emax' },
      curve((x) => 2 + (10 * x) / (8 + x)),
    ).estimates;
    expect([emax['e0'], emax['emax'], emax['ed50']].map((value) => Number(value!.toFixed(9)))).toEqual([
      2, 10, 8,
    ]);
    for (const hill of [1.7, -1.7]) {
      const fit = analyse(
        { ...plan, model: 'log_logistic' },
        curve((x) => 12 / (1 + (9 / x) ** hill)),
      ).estimates;
      expect([fit['emax'], fit['ed50'], fit['hill']].map((value) => Number(value!.toFixed(8)))).toEqual([
        12,
        9,
        hill,
      ]);
    }
  });

  it('stands at a stationary point: moving a parameter either way fits worse', () => {
    const csv = curve((x) => 2 + (10 * x) / (8 + x), 0.3);
    const { estimates } = analyse({ ...plan, model: 'emax' }, csv);
    const [e0, emax, ed50] = [estimates['e0']!, estimates['emax']!, estimates['ed50']!];
    const points = csv
      .split('\n')
      .slice(1)
      .map((line) => line.split(',').map(Number) as [number, number]);
    const squares = (a: number, b: number, c: number) =>
      points.reduce((sum, [x, y]) => sum + (y - a - (b * x) / (c + x)) ** 2, 0);
    expect(squares(e0, emax, ed50)).toBeCloseTo(estimates['residual_ss']!, 12);
    for (const factor of [0.999, 1.001]) {
      expect(squares(e0 * factor, emax, ed50)).toBeGreaterThan(estimates['residual_ss']!);
      expect(squares(e0, emax * factor, ed50)).toBeGreaterThan(estimates['residual_ss']!);
      expect(squares(e0, emax, ed50 * factor)).toBeGreaterThan(estimates['residual_ss']!);
    }
    expect(estimates['df']).toBe(9);
  });

  it('does not depend on the units of dose and response', () => {
    const one = analyse(
      { ...plan, model: 'log_logistic' },
      curve((x) => 12 / (1 + (9 / x) ** 1.7), 0.2),
    ).estimates;
    const csv = csvOf(
      ['dose', 'value'],
      [...doses, ...doses].map((x, i) => [x * 1e-9, 1e6 * (12 / (1 + (9 / x) ** 1.7) + 0.2 * ((i % 3) - 1))]),
    );
    const other = analyse({ ...plan, model: 'log_logistic' }, csv).estimates;
    expect(other['ed50']! / one['ed50']!).toBeCloseTo(1e-9, 15);
    expect(other['emax_se']! / one['emax_se']! / 1e6).toBeCloseTo(1, 6);
    expect(other['hill_se']! / one['hill_se']!).toBeCloseTo(1, 6);
  });

  it('sums trapezoids by subject and averages rows of one dose first', () => {
    const rows = [
      ['a', 0, 1],
      ['a', 2, 3],
      ['a', 2, 5],
      ['a', 4, 4],
      ['b', 0, 2],
      ['b', 2, 2],
      ['c', 4, 8],
      ['c', 0, 6],
      ['c', 2, null],
    ] as const;
    const { tables, estimates, dropped, warnings, n } = analyse(
      { ...plan, subject: 'subject', model: 'none' },
      csvOf(['subject', 'dose', 'value'], rows),
    );
    // a: (1 + 4)·2/2 + (4 + 4)·2/2 = 13, less 1·4; c: (6 + 8)·4/2 = 28, less 6·4
    expect(tables['auc']).toEqual([
      { subject: 'a', n_points: 3, auc: 13, incremental_auc: 9 },
      { subject: 'b', n_points: 2, auc: null, incremental_auc: null },
      { subject: 'c', n_points: 2, auc: 28, incremental_auc: 4 },
    ]);
    expect(estimates).toMatchObject({
      n_observations: 8,
      auc_n: 2,
      auc_mean: 20.5,
      incremental_auc_mean: 6.5,
    });
    expect(dropped).toEqual([{ subject: 'c', reason: 'missing_value', rows: [10] }]);
    expect(warnings.map((warning) => warning.code)).toEqual(['incomplete_auc']);
    expect(n).toBe(3);
  });
});
