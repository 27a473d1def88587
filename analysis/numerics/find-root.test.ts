import { describe, expect, it } from 'vitest';
import { findRoot } from './find-root.ts';

describe('findRoot', () => {
  it('finds roots known in closed form', () => {
    expect(findRoot((x) => x * x - 2, 0, 2)).toBeCloseTo(Math.SQRT2, 13);
    expect(findRoot((x) => Math.cos(x), 1, 2)).toBeCloseTo(Math.PI / 2, 13);
    expect(findRoot((x) => (x - 1) ** 3, 0, 3)).toBeCloseTo(1, 5); // a triple root, as well as it can be known
  });

  it('answers an end that is a root and keeps relative accuracy near zero', () => {
    expect(findRoot((x) => x - 2, 2, 5)).toBe(2);
    expect(findRoot((x) => x - 2, -5, 2)).toBe(2);
    expect(findRoot((x) => Math.log(x / 1e-200), 1e-202, 1e-199) / 1e-200).toBeCloseTo(1, 12);
  });

  it('refuses two points of one sign', () => {
    expect(() => findRoot((x) => x * x + 1, -1, 1)).toThrow('bracket');
  });
});
