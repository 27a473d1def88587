import { describe, expect, it } from 'vitest';
import { analyseLong } from '../testing/data.ts';

const zeros = (n: number) => new Array<number>(n).fill(0);

describe('wilcoxon_signed_rank', () => {
  it('is exact for few differences: all five above zero have p = 2/32', () => {
    const { estimates, warnings } = analyseLong(
      { method: 'wilcoxon_signed_rank' },
      { x: [1, 2, 3, 4, 5], y: zeros(5) },
    );
    expect(estimates).toMatchObject({
      sum_positive_ranks: 15,
      exact: 1,
      z: null,
      p_value: 0.0625,
      pseudomedian: 3,
      rank_biserial: 1,
      ci_lower: 1,
      ci_upper: 5,
      achieved_confidence: 0.9375,
    });
    expect(warnings).toEqual([]);
  });

  it('approximates with continuity correction when there are ties and zeros, by hand', () => {
    // Non-zero d: 1, 1, −2, 3; mid-ranks 1.5, 1.5, 3, 4; V = 7; mean 5; σ² = 4·5·9/24 − 6/48 = 7.375
    const { estimates, warnings } = analyseLong(
      { method: 'wilcoxon_signed_rank' },
      { x: [1, 1, -2, 3, 0], y: zeros(5) },
    );
    expect(estimates).toMatchObject({
      sum_positive_ranks: 7,
      n_nonzero: 4,
      n_zero: 1,
      exact: 0,
      achieved_confidence: null,
    });
    expect(estimates['z']).toBeCloseTo(1.5 / Math.sqrt(7.375), 14);
    expect(warnings.map((warning) => warning.code)).toEqual(['zero_differences', 'normal_approximation']);
  });

  it('corrects towards the mean in the direction of the hypothesis', () => {
    const data = { x: [1, 1, -2, 3, 0], y: zeros(5) };
    const z = (direction: string) =>
      analyseLong({ method: 'wilcoxon_signed_rank', direction }, data).estimates['z'];
    expect(z('above')).toBeCloseTo(1.5 / Math.sqrt(7.375), 14); // V − 5 − ½
    expect(z('below')).toBeCloseTo(2.5 / Math.sqrt(7.375), 14); // V − 5 + ½
  });

  it('sees ties of decimals that doubles hide', () => {
    const { estimates } = analyseLong(
      { method: 'wilcoxon_signed_rank' },
      { x: [1.3, 2.3, 5], y: [1.2, 2.2, 4] },
    );
    expect(estimates['exact']).toBe(0);
  });

  it('moves with the null value, except the median difference', () => {
    const data = { x: [1.5, 2.5, 4, 7], y: zeros(4) };
    const plain = analyseLong({ method: 'wilcoxon_signed_rank' }, data).estimates;
    const shifted = analyseLong({ method: 'wilcoxon_signed_rank', null_value: 2 }, data).estimates;
    expect(shifted['sum_positive_ranks']).toBe(8.5); // −0.5, 0.5, 2, 5: mid-ranks 1.5, 1.5, 3, 4
    expect(shifted['pseudomedian']).toBe(plain['pseudomedian']);
    expect(shifted['median_difference']).toBe(3.25);
  });

  it('takes a single subject, and says what confidence that attains', () => {
    const { estimates, n } = analyseLong({ method: 'wilcoxon_signed_rank' }, { x: [3], y: [1] });
    expect(n).toBe(1);
    expect(estimates).toMatchObject({ p_value: 1, ci_lower: 2, ci_upper: 2, achieved_confidence: 0 });
  });

  it('turns approximate beyond fifty differences', () => {
    const x = Array.from({ length: 51 }, (_, i) => i + 1);
    expect(analyseLong({ method: 'wilcoxon_signed_rank' }, { x, y: zeros(51) }).estimates['exact']).toBe(0);
    expect(
      analyseLong({ method: 'wilcoxon_signed_rank' }, { x: x.slice(1), y: zeros(50) }).estimates['exact'],
    ).toBe(1);
  });
});

describe('sign_test', () => {
  it('counts signs and bounds the median by order statistics', () => {
    // n = 6: P(B ≤ 0) = 1/64 ≤ 0.025 < P(B ≤ 1) = 7/64, so k = 1
    const { estimates } = analyseLong({ method: 'sign_test' }, { x: [1, 2, 3, 4, 5, -6], y: zeros(6) });
    expect(estimates).toMatchObject({
      n_positive: 5,
      n_negative: 1,
      p_value: 14 / 64,
      ci_lower: -6,
      ci_upper: 5,
      achieved_confidence: 1 - 2 / 64,
      median_difference: 2.5,
    });
  });

  it('says that four subjects cannot give 95 per cent', () => {
    const { estimates, warnings } = analyseLong({ method: 'sign_test' }, { x: [1, 2, 3, 4], y: zeros(4) });
    expect(estimates).toMatchObject({ ci_lower: null, ci_upper: null, achieved_confidence: null });
    expect(warnings.map((warning) => warning.code)).toEqual(['confidence_not_attainable']);
    expect(estimates['proportion_ci_lower']).toBeCloseTo(0.025 ** (1 / 4), 14); // Clopper–Pearson for 4 of 4
    expect(estimates['proportion_ci_upper']).toBe(1);
  });

  it('closes the open side of a proportion at 0 or 1', () => {
    const data = { x: [1, 2, -3, 4, 5, 6, 7, 0], y: zeros(8) };
    const above = analyseLong({ method: 'sign_test', direction: 'above' }, data);
    const below = analyseLong({ method: 'sign_test', direction: 'below' }, data);
    expect(above.estimates).toMatchObject({
      proportion_ci_upper: 1,
      ci_upper: null,
      p_value: 8 / 128,
      n_zero: 1,
    });
    expect(below.estimates).toMatchObject({ proportion_ci_lower: 0, ci_lower: null, p_value: 127 / 128 });
  });
});

describe('permutation_paired', () => {
  it('enumerates all sign assignments, ties of sums included', () => {
    // 1, 2, 3: |T| ≥ 6 for two of eight; 1, 2, −3: every sum is at least 0
    expect(
      analyseLong({ method: 'permutation_paired' }, { x: [1, 2, 3], y: zeros(3) }).estimates,
    ).toMatchObject({
      n_extreme: 2,
      n_permutations: 8,
      p_value: 0.25,
      exact: 1,
    });
    expect(
      analyseLong({ method: 'permutation_paired' }, { x: [1, 2, -3], y: zeros(3) }).estimates['p_value'],
    ).toBe(1);
    expect(
      analyseLong({ method: 'permutation_paired', direction: 'above' }, { x: [0.1, 0.2, -0.3], y: zeros(3) })
        .estimates['n_extreme'],
    ).toBe(5); // 0.6, 0.4, 0.2 and twice 0, which 0.1 + 0.2 − 0.3 misses in doubles
  });

  it('samples above twenty subjects and comes near the t test', () => {
    const x = Array.from({ length: 30 }, (_, i) => Math.sin(i * 1.7) + 0.3);
    const plan = { resamples: 20_000, seed: 5 };
    const { estimates } = analyseLong({ method: 'permutation_paired', ...plan }, { x, y: zeros(30) });
    const t = analyseLong({ method: 'paired_t' }, { x, y: zeros(30) }).estimates;
    expect(estimates).toMatchObject({ exact: 0, n_permutations: 20_000, n_extreme: null });
    expect(Math.abs(estimates['p_value']! - t['p_value']!)).toBeLessThan(0.01);
  });
});

describe('friedman', () => {
  it('follows the formulas by hand for perfect agreement of three rankers', () => {
    // rank sums 3, 6, 9: χ² = 12·(9 + 0 + 9)/(3·3·4) = 6, W = 1; the F form has no denominator
    const data = { a: [1, 2, 3], b: [2, 4, 7], c: [5, 6, 9] };
    const { estimates, tables } = analyseLong({ method: 'friedman' }, data);
    expect(estimates).toMatchObject({
      chi_square: 6,
      df: 2,
      kendall_w: 1,
      iman_davenport_f: null,
      iman_davenport_p: null,
    });
    expect(estimates['p_value']).toBeCloseTo(Math.exp(-3), 15);
    expect(tables['ranks']).toEqual([
      { level: 'a', rank_sum: 3, mean_rank: 1, median: 2 },
      { level: 'b', rank_sum: 6, mean_rank: 2, median: 4 },
      { level: 'c', rank_sum: 9, mean_rank: 3, median: 6 },
    ]);
    expect(tables['pairwise_conover']![0]).toMatchObject({
      level_1: 'a',
      level_2: 'b',
      t: null,
      p_value: null,
      p_adjusted: null,
    });
    expect(tables['pairwise_nemenyi']![1]).toMatchObject({
      level_1: 'a',
      level_2: 'c',
      mean_rank_difference: -2,
    });
    expect(tables['pairwise_nemenyi']![1]!['q']).toBeCloseTo(2 * Math.sqrt(3), 14); // √2·2/√(12/18)
  });

  it('corrects for ties within subjects, by hand', () => {
    // ranks 1.5, 1.5, 3 and 1, 2, 3: sums 2.5, 3.5, 6; 12·6.5/(2·3·4 − 6/2) = 78/21
    const { estimates } = analyseLong({ method: 'friedman' }, { a: [1, 1], b: [1, 2], c: [2, 3] });
    expect(estimates['chi_square']).toBeCloseTo(78 / 21, 14);
  });

  it('has no pairwise test where two levels agree in every subject', () => {
    const { tables } = analyseLong({ method: 'friedman' }, { a: [1, 2, 3], b: [1, 2, 3], c: [5, 1, 9] });
    expect(tables['pairwise_wilcoxon']![0]).toMatchObject({
      sum_positive_ranks: null,
      p_value: null,
      p_adjusted: null,
    });
    expect(tables['pairwise_wilcoxon']![1]).toMatchObject({ level_1: 'a', level_2: 'c', exact: 1 });
  });
});
