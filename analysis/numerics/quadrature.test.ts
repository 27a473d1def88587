import { describe, expect, it } from 'vitest';
import { integrate } from './quadrature.ts';

describe('integrate', () => {
  it('is exact for polynomials and close for integrals in closed form', () => {
    expect(integrate((x) => x ** 9, 0, 2)).toBeCloseTo(102.4, 11);
    expect(integrate(Math.exp, -40, 0)).toBeCloseTo(1, 13);
    expect(integrate((x) => 1 / (1 + x * x), -1000, 1000)).toBeCloseTo(2 * Math.atan(1000), 12);
  });

  it('finds a step that is narrow beside the interval', () => {
    const step = (x: number) => 1 / (1 + Math.exp(-(x - 0.3) / 1e-5));
    expect(integrate(step, 0, 1)).toBeCloseTo(0.7, 12);
  });
});
