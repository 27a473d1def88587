import { createRequire } from 'node:module';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { convert, sameDimension } from './convert.ts';
import { DomainError, UnitError } from './errors.ts';

// The package has no types; what is called of it is spelled here.
const { UcumLhcUtils } = createRequire(import.meta.url)('@lhncbc/ucum-lhc') as {
  UcumLhcUtils: {
    getInstance(): { convertUnitTo(from: string, value: number, to: string): { toVal: number | null } };
  };
};
const pressures = ['mm[Hg]', 'kPa', 'Pa', 'cm[H2O]', 'dyn/cm2'];

describe('convert', () => {
  it('uses the conventional millimetre of mercury', () => {
    // BIPM, SI brochure table of other units: 1 mmHg ≈ 133.322 Pa; conventional value 13 595.1 × 9.806 65 / 1000 Pa
    expect(convert(1, 'mm[Hg]', 'Pa')).toBe(133.322387415);
  });

  it.each([
    // By algebra from the SI definitions and 133.322387415 Pa
    [1, "[wood'U]", 'dyn.s/cm5', 79.993432449, 1e-10],
    [1, "[wood'U]", 'Pa.s/m3', 7999343.2449, 1e-12],
    [1, 'mm[Hg].min.dL/mL', 'Pa.s', 799934.32449, 1e-12],
    [1, 'mL/min/dL', '%/min', 1, 0],
    [1, 'mL/min/dL', 'mL/min/(100.mL)', 1, 0],
    [1, 'cP', 'mPa.s', 1, 0],
    [1, 'dyn/cm2', 'Pa', 0.1, 0],
    [42, '%', 'L/L', 0.42, 0],
    [37, 'Cel', 'K', 310.15, 1e-15],
    [310.15, 'K', 'Cel', 37, 1e-13],
  ])('takes %d %s in %s to %d', (value, from, to, expected, tolerance) => {
    expect(Math.abs(convert(value, from, to) - expected)).toBeLessThanOrEqual(tolerance * Math.abs(expected));
  });

  it('agrees with an independent UCUM library within the rounding of its millimetre of mercury', () => {
    const ucum = UcumLhcUtils.getInstance();
    const pairs = [
      ['mm[Hg]', 'kPa'],
      ['cm[H2O]', 'mm[Hg]'],
      ['mL/min/dL/mm[Hg]', 'm3/s/m3/Pa'],
      ['dyn.s.m2/cm5', "[wood'U].m2"],
      ['g/dL', 'g/L'],
      ['mL/L/kPa', 'mL/dL/mm[Hg]'],
      ['ug/min', 'mg/h'],
      ['cm2/s', 'mm2/s'],
      ['/min', 'Hz'],
      ['kgf', 'N'],
      ['deg', 'rad'],
      ['10*3/uL', '/L'],
      ['mmol/L', 'mol/m3'],
      ['mV/s', 'V/min'],
    ] as const;
    for (const [from, to] of pairs) {
      const expected = ucum.convertUnitTo(from, 2.5, to).toVal;
      expect(expected, from).not.toBeNull();
      expect(Math.abs(convert(2.5, from, to) / expected! - 1), `${from} to ${to}`).toBeLessThan(4e-6);
    }
  });

  it('returns to the value it came from', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 1e-6, max: 1e6, noNaN: true }),
        fc.constantFrom(...pressures),
        fc.constantFrom(...pressures),
        (value, from, to) =>
          Math.abs(convert(convert(value, from, to), to, from) - value) <= 1e-15 * Math.abs(value) * 4,
      ),
    );
  });

  it('does not turn a forearm resistance into Wood units', () => {
    expect(() => convert(36, 'mm[Hg].min.dL/mL', "[wood'U]")).toThrow(UnitError);
    expect(() => convert(36, 'mm[Hg].min.dL/mL', "[wood'U]")).toThrow(/different things/);
  });

  it.each([
    'ml/min/100ml',
    '',
    'mmHg',
    'mm[HG]',
    'm99999999',
    'mL//min',
    '(mL',
    'x'.repeat(200),
    '(('.repeat(60),
  ])('does not understand %j', (code) => {
    expect(() => convert(1, code, 'Pa')).toThrow(UnitError);
  });

  it.each([NaN, Infinity, -Infinity])('refuses %d', (value) => {
    expect(() => convert(value, 'Pa', 'kPa')).toThrow(DomainError);
  });
});

describe('sameDimension', () => {
  it('tells relative flow from absolute flow', () => {
    expect(sameDimension('mL/min/dL', 'L/min')).toBe(false);
    expect(sameDimension('mL/min/dL', '%/s')).toBe(true);
  });
});
