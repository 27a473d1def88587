import { describe, expect, it } from 'vitest';
import { isRange, layPasted } from './pasted.ts';

const arms = { fields: 2, readings: 4, readingsAcross: true };
const pressures = { fields: 2, readings: 3, readingsAcross: false };

describe('layPasted', () => {
  it('lays a column along the readings of the field, from the cell in hand', () => {
    const { cells, left } = layPasted('2.52\n2.38\n2.44\n', { field: 1, reading: 1 }, arms);
    expect(cells).toEqual([
      { field: 1, reading: 1, text: '2.52' },
      { field: 1, reading: 2, text: '2.38' },
      { field: 1, reading: 3, text: '2.44' },
    ]);
    expect(left).toEqual([]);
  });

  it('takes columns as fields and lines as readings', () => {
    const { cells } = layPasted('118\t74\r\n116\t71', { field: 0, reading: 0 }, pressures);
    expect(cells).toEqual([
      { field: 0, reading: 0, text: '118' },
      { field: 1, reading: 0, text: '74' },
      { field: 0, reading: 1, text: '116' },
      { field: 1, reading: 1, text: '71' },
    ]);
  });

  it('lays a single line along readings that stand side by side', () => {
    const { cells } = layPasted('2.5\t2.4', { field: 0, reading: 2 }, arms);
    expect(cells.map(({ reading }) => reading)).toEqual([2, 3]);
    expect(layPasted('118\t74', { field: 0, reading: 2 }, pressures).cells.map(({ field }) => field)).toEqual(
      [0, 1],
    );
  });

  it('names what found no place instead of dropping it', () => {
    expect(layPasted('1\n2\n3', { field: 0, reading: 3 }, arms).left).toEqual(['2', '3']);
    expect(layPasted('1\t9', { field: 1, reading: 0 }, pressures).left).toEqual(['9']);
  });

  it('keeps what was copied as it was written', () => {
    expect(layPasted('5,50\n118.50', { field: 0, reading: 0 }, arms).cells.map(({ text }) => text)).toEqual([
      '5,50',
      '118.50',
    ]);
  });
});

describe('isRange', () => {
  it('tells one value from several', () => {
    expect(isRange('118\n')).toBe(false);
    expect(isRange('118\n116')).toBe(true);
    expect(isRange('118\t74')).toBe(true);
  });
});
