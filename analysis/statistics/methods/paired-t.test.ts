import { describe, expect, it } from 'vitest';
import { noncentralTCdf, noncentralTUpperTail } from '../../numerics/noncentral-t.ts';
import { analyseLong } from '../testing/data.ts';

const x = [5.2, 6.1, 4.4, 7.3, 5.9];
const y = [4.8, 5.0, 4.9, 6.1, 5.2];

describe('paired_t', () => {
  it('follows the textbook formulas by hand', () => {
    // d = 2, 4, 6: mean 4, SD 2, SE 2/√3, t = 4/(2/√3) = 2√3 with 2 df; J(2) = Γ(1)/(1·Γ(½)) = 1/√π
    const { estimates, n } = analyseLong({ method: 'paired_t' }, { x: [3, 7, 11], y: [1, 3, 5] });
    expect(n).toBe(3);
    expect(estimates['mean_difference']).toBe(4);
    expect(estimates['sd_difference']).toBe(2);
    expect(estimates['t']).toBeCloseTo(2 * Math.sqrt(3), 14);
    expect(estimates['p_value']).toBeCloseTo(1 - Math.sqrt(12 / 14), 14); // 1 − t/√(t² + 2) for 2 df
    expect(estimates['cohen_dz']).toBe(2);
    expect(estimates['hedges_g_av']).toBeCloseTo(4 / Math.sqrt(10) / Math.sqrt(Math.PI), 14);
    expect(estimates['correlation']).toBeCloseTo(1, 14);
  });

  it('bounds the effect size by the noncentralities that give the observed t 97.5 and 2.5 per cent', () => {
    const { estimates } = analyseLong({ method: 'paired_t' }, { x, y });
    const t = estimates['mean_difference']! / estimates['standard_error']!;
    const root = Math.sqrt(5);
    expect(noncentralTUpperTail(t, 4, estimates['cohen_dz_ci_lower']! * root)).toBeCloseTo(0.025, 11);
    expect(noncentralTCdf(t, 4, estimates['cohen_dz_ci_upper']! * root)).toBeCloseTo(0.025, 11);
  });

  it('leaves the open side of a one-sided interval null, and adds both one-sided p-values to one', () => {
    const above = analyseLong(
      { method: 'paired_t', direction: 'above', null_value: 0.2 },
      { x, y },
    ).estimates;
    const below = analyseLong(
      { method: 'paired_t', direction: 'below', null_value: 0.2 },
      { x, y },
    ).estimates;
    expect([above['ci_upper'], below['ci_lower']]).toEqual([null, null]);
    expect(above['ci_lower']).toBeLessThan(below['ci_upper']!);
    expect(above['p_value']! + below['p_value']!).toBeCloseTo(1, 14);
    expect(above['cohen_dz_ci_upper']).toBe(below['cohen_dz_ci_upper']);
  });

  it('has no corrected effect size for two pairs and no correlation with a constant column', () => {
    const { estimates } = analyseLong({ method: 'paired_t' }, { x: [1, 1], y: [2, 5] });
    expect(estimates).toMatchObject({
      hedges_g_av: null,
      hedges_g_av_ci_lower: null,
      correlation: null,
      df: 1,
    });
  });

  it('gives ratios on the log scale', () => {
    const { estimates } = analyseLong(
      { method: 'paired_t', transform: 'log' },
      { x: [2, 8, 4], y: [1, 2, 1] },
    );
    expect(estimates['ratio']).toBeCloseTo(32 ** (1 / 3), 14); // ratios 2, 4, 4
  });
});
