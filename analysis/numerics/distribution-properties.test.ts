import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { betaQuantile } from './beta-quantile.ts';
import { chiSquareCdf, chiSquareQuantile } from './chi-square.ts';
import { fCdf, fQuantile, fUpperTail } from './f-distribution.ts';
import { incompleteBeta } from './incomplete-beta.ts';
import { noncentralTCdf, noncentralTUpperTail } from './noncentral-t.ts';
import { normalCdf, normalQuantile } from './normal.ts';
import { studentTCdf, studentTQuantile, studentTUpperTail } from './student-t.ts';

const probability = fc.double({ min: 1e-12, max: 1 - 1e-12, noNaN: true });
const degrees = fc.double({ min: 0.5, max: 500, noNaN: true });
const close = (got: number, wanted: number, relative: number) =>
  expect(Math.abs(got - wanted)).toBeLessThanOrEqual(relative * Math.abs(wanted));

describe('distributions', () => {
  it('returns to the probability from the quantile', () => {
    fc.assert(
      fc.property(probability, degrees, degrees, (p, a, b) => {
        close(normalCdf(normalQuantile(p)), p, 1e-11);
        close(studentTCdf(studentTQuantile(p, a), a), p, 1e-11);
        close(chiSquareCdf(chiSquareQuantile(p, a), a), p, 1e-11);
        close(fCdf(fQuantile(p, a, b), a, b), p, 1e-11);
        const { x, y } = betaQuantile(p, a, b);
        close(incompleteBeta(x, y, a, b), p, 1e-11);
      }),
      { numRuns: 200 },
    );
  });

  it('has tails that add to one and mirror each other', () => {
    const value = fc.double({ min: -30, max: 30, noNaN: true });
    fc.assert(
      fc.property(value, degrees, degrees, (t, a, b) => {
        close(studentTCdf(t, a) + studentTUpperTail(t, a), 1, 1e-14);
        close(fCdf(Math.abs(t), a, b) + fUpperTail(Math.abs(t), a, b), 1, 1e-13);
        expect(studentTUpperTail(t, a)).toBe(studentTCdf(-t, a));
        close(noncentralTCdf(t, a, 1.5) + noncentralTUpperTail(t, a, 1.5), 1, 1e-11);
      }),
      { numRuns: 100 },
    );
  });

  it('has a noncentral t that is central without noncentrality and falls with it', () => {
    close(noncentralTCdf(1.7, 11, 0), studentTCdf(1.7, 11), 1e-12);
    expect(noncentralTCdf(1.7, 11, 1)).toBeLessThan(noncentralTCdf(1.7, 11, 0.9));
  });
});
