import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { isWrittenNumber, parseWrittenNumber } from './written-number.ts';

// proves DE-07
describe('a typed number', () => {
  it.each([
    ['118.50', 118.5, '118.50'],
    [' 5.50 ', 5.5, '5.50'],
    ['-4', -4, '-4'],
    ['−4', -4, '-4'],
    ['.5', 0.5, '.5'],
    ['1e3', 1000, '1e3'],
    ['0.000', 0, '0.000'],
  ])('%s is kept as it was typed', (text, value, written) => {
    expect(parseWrittenNumber(text)).toEqual({ value, written });
  });

  it.each([
    ['', 'blank'],
    ['   ', 'blank'],
    ['5,50', 'decimal-comma'],
    ['0,375', 'decimal-comma'],
    ['1,234', 'ambiguous'],
    ['1.234,5', 'ambiguous'],
    ['1 234', 'ambiguous'],
    ['1.2.3', 'ambiguous'],
    ['1e999', 'out-of-range'],
    ['1e-999', 'out-of-range'],
    ['NaN', 'not-a-number'],
    ['Infinity', 'not-a-number'],
    ['0x10', 'not-a-number'],
    ['12a', 'not-a-number'],
  ])('%s is asked back, never guessed', (text, code) => {
    expect(parseWrittenNumber(text)).toMatchObject({ code });
  });

  it('offers the decimal point for a decimal comma', () => {
    expect(parseWrittenNumber('5,50')).toMatchObject({ suggestion: '5.50' });
  });

  it('is the number that JavaScript writes', () => {
    fc.assert(
      fc.property(fc.double({ noNaN: true, noDefaultInfinity: true }), (value) => {
        const result = parseWrittenNumber(String(value));
        expect(isWrittenNumber(result) && result.value === (value === 0 ? 0 : value)).toBe(true);
      }),
    );
  });
});
