import { describe, expect, it } from 'vitest';
import { gridSteps, isConstantOnGrid, onGrid, roundingGrid } from './grid.ts';

describe('rounding grid', () => {
  it.each([
    [[0.5, -1], 1e-15],
    [[1.0000001], 1e-14],
    [[1000, 3], 1e-12],
    [[1000.1], 1e-11],
    [[1e8], 1e-7],
    [[2e-9], 1e-23],
    [[0, 0], 1e-15],
    [[1e-5], 1e-20],
  ])('of %j is %d: 10^(ceil(log10 M) − 15)', (values, grid) => {
    expect(roundingGrid(values)).toBe(grid);
  });

  it('is right at every power of ten', () => {
    for (let k = -200; k <= 200; k += 1) expect(roundingGrid([Number(`1e${k}`)])).toBe(Number(`1e${k - 15}`));
  });

  it('sees decimal ties and zeros that doubles hide', () => {
    const grid = roundingGrid([1.3, 2.3, 4.1]);
    expect(1.3 - 1.2).not.toBe(2.3 - 2.2);
    expect(onGrid(1.3 - 1.2, grid)).toBe(onGrid(2.3 - 2.2, grid));
    expect(onGrid(0.1 + 0.2 - 0.3, grid)).toBe(0);
    expect(isConstantOnGrid([1.3 - 1.2, 2.3 - 2.2, 4.1 - 4], grid)).toBe(true);
    expect(isConstantOnGrid([0.1, 0.1 + 3 * grid], grid)).toBe(false);
  });

  it('rounds half to even', () => {
    expect([0.5, 1.5, 2.5, -0.5, -1.5].map((value) => gridSteps(value, 1))).toEqual([0, 2, 2, 0, -2]);
  });
});
