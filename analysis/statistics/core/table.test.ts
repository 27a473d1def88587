import { describe, expect, it } from 'vitest';
import { Table } from './table.ts';

const table = Table.ofCsv('s,x,c\na,1.5,u\nb,,v\n,+.5e1,\nc,-2.,u\n');

describe('Table', () => {
  it('reads numbers in every spelling that the contract allows, and empty as missing', () => {
    expect([...table.numbers('x')]).toEqual([1.5, NaN, 5, -2]);
  });

  it.each(['NA', 'NaN', 'Inf', '1,5', '1e', '0x10', '1 2', '--1', '1e999', '\u00a0'])(
    'refuses %s as a number',
    (cell) => {
      expect(() => Table.ofCsv(`x,y\n1,2\n"${cell}",3\n`).numbers('x')).toThrowError(
        expect.objectContaining({ code: 'non_numeric_cell', fields: { column: 'x', row: 3 } }) as Error,
      );
    },
  );

  it('names the first row with an empty key, and the first value that is not positive', () => {
    expect(() => table.keys('s')).toThrowError(
      expect.objectContaining({ fields: { column: 's', row: 4 } }) as Error,
    );
    expect(() => table.positive('x', table.numbers('x'))).toThrowError(
      expect.objectContaining({ code: 'non_positive_value', fields: { column: 'x', row: 5 } }) as Error,
    );
  });

  it('gives levels in order of first appearance, or the wanted ones if all are there', () => {
    expect(table.levels('c')).toEqual(['u', 'v']);
    expect(table.levels('c', ['v', 'u'])).toEqual(['v', 'u']);
    expect(() => table.levels('c', ['u', 'w'])).toThrowError(
      expect.objectContaining({ code: 'level_missing', fields: { column: 'c', level: 'w' } }) as Error,
    );
  });

  it('names a column that is not there', () => {
    expect(() => table.text('z')).toThrowError(
      expect.objectContaining({ code: 'unknown_column', fields: { column: 'z' } }) as Error,
    );
  });
});
