import { describe, expect, it } from 'vitest';
import { studentTTwoSided } from '../../numerics/student-t.ts';
import { analyse } from '../analyse.ts';
import { mean, standardDeviation } from '../core/moments.ts';
import { csvOf } from '../testing/data.ts';

describe('shapiro_wilk', () => {
  const test = (values: number[]) =>
    analyse(
      { method: 'shapiro_wilk', outcome: 'v', subject: 's' },
      csvOf(
        ['s', 'v'],
        values.map((value, i) => [i, value]),
      ),
    ).estimates;

  it('knows three values in closed form: W is 1 for equal steps and ¾ for a tie, with p 1 and 0', () => {
    expect(test([1, 2, 3])['w']).toBeCloseTo(1, 14);
    expect(test([1, 2, 3])['p_value']).toBeCloseTo(1, 7);
    expect(test([1, 1, 2])['w']).toBeCloseTo(0.75, 14);
    expect(test([1, 1, 2])['p_value']).toBeCloseTo(0, 7);
  });

  it('gives the W and p of Royston 1995 (AS R94) for the weights of eleven men: 0.79 and 0.0067', () => {
    // Shapiro & Wilk 1965, Biometrika 52:591-611, example 3: W = 0.79
    const { w, p_value } = test([148, 154, 158, 160, 161, 162, 166, 170, 182, 195, 236]);
    expect(w).toBeCloseTo(0.79, 2);
    expect(p_value).toBeCloseTo(0.0067, 3);
  });

  it('describes skewness and excess kurtosis by moments with divisor n', () => {
    // 0, 0, 0, 4: m₂ = 3, m₃ = 6, m₄ = 21
    expect(test([0, 0, 0, 4])['skewness']).toBeCloseTo(6 / 3 ** 1.5, 14);
    expect(test([0, 0, 0, 4])['excess_kurtosis']).toBeCloseTo(21 / 9 - 3, 14);
  });
});

describe('group_share', () => {
  const a = [-0.21, -0.28, -0.25, -0.3, -0.2, -0.26];
  const b = [-0.5, -0.62, -0.49, -0.7, -0.44, -0.58];
  const plan = {
    method: 'group_share',
    outcome: 'b',
    subject: 's',
    covariates: ['a'],
    resamples: 2000,
    seed: 4,
  };
  const csv = (left: number[], right: number[]) =>
    csvOf(
      ['s', 'a', 'b'],
      left.map((value, i) => [i, value, right[i]!]),
    );

  it("has Fieller's limits: there the t test of A − ρB has p = 0.05 exactly", () => {
    const { estimates } = analyse(plan, csv(a, b));
    for (const key of ['share_ci_lower', 'share_ci_upper']) {
      const rest = a.map((value, i) => value - estimates[key]! * b[i]!);
      const t = mean(rest) / (standardDeviation(rest) / Math.sqrt(6));
      expect(studentTTwoSided(t, 5)).toBeCloseTo(0.05, 11);
    }
    expect(estimates['share']).toBeCloseTo(mean(a) / mean(b), 14);
    expect(estimates['share_ci_lower']).toBeLessThan(estimates['share']!);
    expect(estimates['share_ci_upper']).toBeGreaterThan(estimates['share']!);
    expect(estimates['percentile_ci_lower']).toBeGreaterThan(estimates['share_ci_lower']! - 0.1);
  });

  it('has no interval when the whole may be zero, and no share when it is', () => {
    const loose = analyse(plan, csv(a, [0.3, -0.4, 0.2, -0.35, 0.1, -0.05]));
    expect(loose.estimates).toMatchObject({ share_ci_lower: null, bca_z0: null, percentile_ci_upper: null });
    expect(loose.estimates['share']).not.toBeNull();
    expect(loose.warnings.map((warning) => warning.code)).toEqual(['share_not_estimable']);
    const none = analyse(plan, csv(a, [0.1, -0.1, 0.2, -0.2, 0.3, -0.3]));
    expect(none.estimates).toMatchObject({ share: null, fieller_g: null });
  });
});
