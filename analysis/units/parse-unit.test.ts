import { expect, it } from 'vitest';
import { multiplyUnits, parseUnit, writeUnit } from './parse-unit.ts';

it.each([
  ['s', '/s', '1'],
  ['mL/min/dL', 'min', 'mL/dL'],
  ['mPa.s/%', '%', 'mPa.s'],
  ['mPa.s.dL/g', 'g/dL', 'mPa.s'],
  ['m-3', '1', '/m3'],
])('multiplies %s by %s to %s, terms cancelled', (one, other, expected) => {
  expect(writeUnit(multiplyUnits(parseUnit(one), parseUnit(other)))).toBe(expected);
});

it('keeps factors as exact fractions', () => {
  const { factor } = parseUnit("[wood'U]");
  // 133.322387415 × 60 / 0.001 = 7 999 343.2449 Pa.s/m3, ×1000 for the gram as base of mass
  expect([factor.numerator, factor.denominator]).toEqual([79993432449n, 10n]);
});
