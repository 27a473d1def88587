import { describe, expect, it } from 'vitest';
import { formatBytes, formatCount, formatNumber, formatP, formatPercent, shortHash } from './numbers.ts';

describe('formatNumber', () => {
  it.each([
    [2.4537, {}, '2.45'],
    [-3.21, { decimals: 1 }, '−3.2'],
    [118.5, { decimals: 2 }, '118.50'],
    [1234, { significant: 3 }, '1234'],
    [0.0123, { significant: 2 }, '0.012'],
    [1.44e8, {}, '1.44 × 10⁸'],
    [0.00016, { significant: 2 }, '1.6 × 10⁻⁴'],
    [0, {}, '0.00'],
  ])('shows %d with %o as %s', (value, options, shown) => {
    expect(formatNumber(value, options)).toBe(shown);
  });

  it('says that there is no value instead of showing one that is no number', () => {
    expect(formatNumber(NaN)).toBe('no value');
    expect(formatNumber(Infinity)).toBe('no value');
  });
});

describe('formatP', () => {
  it.each([
    [0.41, '0.41'],
    [0.0412, '0.04'],
    [0.0043, '0.0043'],
    [0.001, '0.001'],
    [1.6e-8, '1.6 × 10⁻⁸'],
    [0, '< 10⁻³⁰⁰'],
  ])('shows %d as %s', (p, shown) => {
    expect(formatP(p)).toBe(shown);
  });
});

describe('counts, shares, sizes and hashes', () => {
  it('groups thousands by narrow spaces that do not break', () => {
    expect(formatCount(5000)).toBe('5\u202f000');
    expect(formatCount(999)).toBe('999');
    expect(formatCount(1234567)).toBe('1\u202f234\u202f567');
  });

  it('puts a space before the per cent sign', () => {
    expect(formatPercent(0.61)).toBe('61\u00a0%');
    expect(formatPercent(-0.034, 1)).toBe('−3.4\u00a0%');
  });

  it('names sizes by powers of a thousand', () => {
    expect(formatBytes(1_230_000)).toBe('1.2\u00a0MB');
    expect(formatBytes(512)).toBe('512\u00a0B');
  });

  it('shortens a hash to its two ends', () => {
    expect(shortHash('9f2c41aaaaaaaaaaaaaae07b')).toBe('9f2c41…e07b');
    expect(shortHash('9f2c41')).toBe('9f2c41');
  });
});
