import { describe, expect, it } from 'vitest';
import { mean, median } from '../core/moments.ts';
import { resampledMedianDistribution } from '../core/median-distribution.ts';
import { analyseLong } from '../testing/data.ts';

const x = [12.1, 14.3, 9.8, 11.2, 15.4, 13.3, 10.9];
const y = [11.0, 14.9, 9.1, 9.6, 13.2, 13.0, 10.1];

describe('geometric_mean_ratio', () => {
  it('is the ratio of geometric means with the p-value of the logarithms', () => {
    const { estimates } = analyseLong({ method: 'geometric_mean_ratio' }, { x, y });
    const log = analyseLong({ method: 'paired_t', transform: 'log' }, { x, y }).estimates;
    const geometric = (values: number[]) => Math.exp(mean(values.map(Math.log)));
    expect(estimates['ratio']).toBeCloseTo(geometric(x) / geometric(y), 13);
    expect(estimates['p_value']).toBe(log['p_value']);
    expect(estimates['percent_change']).toBeCloseTo(100 * (estimates['ratio']! - 1), 11);
    expect(estimates['ci_lower']).toBe(log['ratio_ci_lower']);
  });

  it('tests against another ratio', () => {
    const { estimates } = analyseLong(
      { method: 'geometric_mean_ratio', null_ratio: 2 },
      { x: [2, 4.1], y: [1, 2] },
    );
    expect(
      Math.abs(estimates['log_mean_difference']! - Math.log(2)) / estimates['log_standard_error']!,
    ).toBeCloseTo(Math.abs(estimates['t']!), 10);
  });
});

describe('equivalence_paired', () => {
  const plan = { method: 'equivalence_paired', equivalence_lower: -1, equivalence_upper: 1.9 };

  it('is equivalent when and only when the 90 per cent interval lies within the bounds', () => {
    for (const equivalence_upper of [1.2, 1.5, 1.6, 1.7, 2.5]) {
      const { estimates } = analyseLong({ ...plan, equivalence_upper }, { x, y });
      const within = estimates['ci_lower']! > -1 && estimates['ci_upper']! < equivalence_upper;
      expect(estimates['equivalent']).toBe(within ? 1 : 0);
      expect(estimates['ci_level']).toBeCloseTo(0.9, 15);
    }
  });

  it.each([
    { equivalence_lower: 2 },
    { transform: 'log' },
    { confidence: 0.5 },
    { equivalence_upper: undefined },
  ])('refuses bounds that make no sense: %j', (change) => {
    expect(() => analyseLong({ ...plan, ...change }, { x, y })).toThrowError(
      expect.objectContaining({ code: 'invalid_plan' }) as Error,
    );
  });
});

describe('bootstrap_ci', () => {
  it('comes near the normal interval for the mean, with the jackknife acceleration', () => {
    const d = x.map((value, i) => value - y[i]!);
    const { estimates } = analyseLong({ method: 'bootstrap_ci', resamples: 40_000, seed: 3 }, { x, y });
    const deviations = d.map((value) => value - mean(d));
    const sum = (power: number) => deviations.reduce((total, value) => total + value ** power, 0);
    expect(estimates['bca_acceleration']).toBeCloseTo(sum(3) / (6 * sum(2) ** 1.5), 12);
    expect(estimates['standard_error']! / Math.sqrt(sum(2) / 49)).toBeCloseTo(1, 1.6);
    expect(Math.abs(estimates['bias']!)).toBeLessThan(0.01);
  });

  it('knows the distribution of a resampled median exactly, as counting every resample shows', () => {
    for (const values of [
      [1, 4, 6],
      [1, 4, 6, 9.5],
      [2, 2, 5, 7, 11],
    ]) {
      const n = values.length;
      const counted = new Map<number, number>();
      for (let code = 0; code < n ** n; code += 1) {
        const resample = values.map((_, i) => values[Math.floor(code / n ** i) % n]!);
        counted.set(median(resample), (counted.get(median(resample)) ?? 0) + 1);
      }
      const distribution = resampledMedianDistribution(values);
      expect(distribution.values).toEqual([...counted.keys()].sort((a, b) => a - b));
      distribution.values.forEach((value, i) => {
        expect(distribution.probabilities[i]).toBeCloseTo(counted.get(value)! / n ** n, 13);
      });
    }
  });

  it('gives limits of a median that are values it can take, whatever the seed', () => {
    const at = (seed: number) =>
      analyseLong({ method: 'bootstrap_ci', statistic: 'median', seed }, { x, y }).estimates;
    expect(at(1)).toEqual(at(2));
    expect(
      [-0.6, 0.3, 0.7, 0.8, 1.1, 1.6, 2.2].some((d) => Math.abs(d - at(1)['percentile_ci_lower']!) < 1e-12),
    ).toBe(true);
  });
});

describe('paired_delta_adjusted', () => {
  const data = { x: [...x, 5, null], y: [...y, null, 6] };
  const plan = { method: 'paired_delta_adjusted', deltas: [0, -2, -10] };

  it('is the t test of the complete subjects for δ = 0 and counts the others', () => {
    const { n, dropped, estimates, tables } = analyseLong(plan, data);
    const complete = analyseLong({ method: 'paired_t' }, { x, y }).estimates;
    expect([n, dropped]).toEqual([9, []]);
    expect(estimates).toMatchObject({ n_complete: 7, n_incomplete: 2, fraction_incomplete: 2 / 9 });
    expect(tables['deltas']![0]).toMatchObject({
      delta: 0,
      t: complete['t'],
      p_value: complete['p_value'],
      df: 6,
    });
    expect(tables['deltas']![1]!['estimate']).toBeCloseTo(complete['mean_difference']! - 4 / 9, 14);
  });

  it('tips where the p-value is exactly α', () => {
    const tipping = analyseLong({ ...plan, deltas: [-10, 10] }, data).estimates['tipping_delta']!;
    const { tables } = analyseLong({ ...plan, deltas: [tipping] }, data);
    expect(tables['deltas']![0]!['p_value']).toBeCloseTo(0.05, 12);
    expect(analyseLong({ ...plan, deltas: [-1e-6, 1e-6] }, data).estimates['tipping_delta']).toBeNull();
    expect(analyseLong(plan, { x, y }).estimates['tipping_delta']).toBeNull();
  });
});
