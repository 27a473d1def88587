import { describe, expect, it } from 'vitest';
import { normalCdf, normalQuantile } from '../../numerics/normal.ts';
import { bootstrapLimits } from './bootstrap.ts';

describe('bootstrapLimits', () => {
  // Quantiles of a standard normal statistic; leave-one-out values 0, 0, 3: l = 1, 1, −2, a = −6/(6·6^1.5)
  const statistic = {
    shareBelow: normalCdf(0.2),
    quantile: normalQuantile,
    leaveOneOut: Float64Array.of(0, 0, 3),
  };
  const a = -1 / 6 ** 1.5;

  it('moves the levels by z₀ and the acceleration, by hand', () => {
    const limits = bootstrapLimits(statistic, 0.95);
    const z = 1.959963984540054;
    expect(limits.bca_acceleration).toBeCloseTo(a, 15);
    expect(limits.bca_z0).toBeCloseTo(0.2, 14);
    expect(limits.percentile_ci_lower).toBeCloseTo(-z, 13);
    expect(limits.bca_ci_lower).toBeCloseTo(0.2 + (0.2 - z) / (1 - a * (0.2 - z)), 12);
    expect(limits.bca_ci_upper).toBeCloseTo(0.2 + (0.2 + z) / (1 - a * (0.2 + z)), 12);
  });

  it('has no corrected limits when the estimate lies outside all resampled values', () => {
    const limits = bootstrapLimits({ ...statistic, shareBelow: 0 }, 0.95);
    expect(limits).toMatchObject({ bca_z0: null, bca_ci_lower: null, bca_ci_upper: null });
  });
});
