import { describe, expect, it } from 'vitest';
import { naturalLogarithm } from './natural-logarithm.ts';

// The values themselves are checked in special-functions.test.ts.
describe('naturalLogarithm', () => {
  it('is exact at one and never further from Math.log than its last digit', () => {
    expect(naturalLogarithm(1)).toBe(0);
    for (let x = 5e-324; x < 1e308; x = x * 7.3 + 5e-324) {
      expect(Math.abs(naturalLogarithm(x) - Math.log(x))).toBeLessThanOrEqual(
        2.3e-16 * Math.abs(Math.log(x)),
      );
    }
  });

  it('refuses what has no logarithm', () => {
    expect(() => naturalLogarithm(0)).toThrow('x must be');
    expect(() => naturalLogarithm(NaN)).toThrow('x must be');
  });
});
