import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { chiSquareCdf, chiSquareUpperTail } from './chi-square.ts';
import { fUpperTail } from './f-distribution.ts';
import { logGamma } from './log-gamma.ts';
import { naturalLogarithm } from './natural-logarithm.ts';
import { noncentralTCdf } from './noncentral-t.ts';
import { normalCdf, normalQuantile } from './normal.ts';
import { studentTQuantile, studentTTwoSided } from './student-t.ts';
import { studentisedRangeUpperTail } from './studentised-range.ts';

// Values to 20 digits from mpmath 1.2, by the script beside them: analysis/reference/statistics/special-functions.py.
const path = new URL('../reference/statistics/special-functions.json', import.meta.url);
const reference = JSON.parse(readFileSync(path, 'utf8')) as Record<string, [number[], string][]>;

/** The function, the relative error allowed, and a size below which the error is absolute. */
const subjects: Record<string, [(...values: number[]) => number, number, number?]> = {
  logGamma: [logGamma, 5e-15, 1],
  naturalLogarithm: [naturalLogarithm, 1.2e-16],
  normalCdf: [normalCdf, 5e-15],
  normalQuantile: [normalQuantile, 1e-15],
  studentTTwoSided: [studentTTwoSided, 5e-13],
  studentTQuantile: [studentTQuantile, 1e-13],
  fUpperTail: [fUpperTail, 1e-12],
  chiSquareUpperTail: [chiSquareUpperTail, 1e-12],
  chiSquareCdf: [chiSquareCdf, 1e-12],
  noncentralTCdf: [noncentralTCdf, 1e-11],
  studentisedRangeUpperTail: [studentisedRangeUpperTail, 1e-11],
};

describe('special functions against 20-digit values', () => {
  it('has values for every function tested here', () => {
    expect(Object.keys(reference).sort()).toEqual(Object.keys(subjects).sort());
  });

  it.each(Object.entries(subjects))('%s', (name, [f, tolerance, floor = 0]) => {
    for (const [values, expected] of reference[name]!) {
      const got = f(...values);
      const error = Math.abs(got - Number(expected));
      expect(error, `${name}(${values.join(', ')}) = ${got}, not ${expected}`).toBeLessThanOrEqual(
        tolerance * Math.max(floor, Math.abs(Number(expected))),
      );
    }
  });
});
