import { describe, expect, it } from 'vitest';
import { parseCsv } from './parse-csv.ts';

const code = (text: string) => {
  try {
    parseCsv(text);
  } catch (error) {
    return (error as { code: string }).code;
  }
  return 'none';
};

describe('parseCsv', () => {
  it('reads quoted cells with commas, line ends and doubled quotes as RFC 4180 has them', () => {
    const text = 'a,b\r\n"x, ""y""","line\nbreak"\r\n1,2\r\n';
    expect(parseCsv(text)).toEqual({
      header: ['a', 'b'],
      rows: [
        ['x, "y"', 'line\nbreak'],
        ['1', '2'],
      ],
    });
  });

  it('trims surrounding spaces, inside and outside quotes, and takes a byte-order mark away', () => {
    expect(parseCsv('\uFEFF a ,"b"\n  1\t, " 2 " \n')).toEqual({ header: ['a', 'b'], rows: [['1', '2']] });
  });

  it('keeps empty cells, also the last of a line or of the file', () => {
    expect(parseCsv('a,b\n,\n1,')).toEqual({
      header: ['a', 'b'],
      rows: [
        ['', ''],
        ['1', ''],
      ],
    });
    expect(parseCsv('a\n\n1\n').rows).toEqual([[''], ['1']]);
  });

  it('allows empty lines at the end of a file with several columns, not within it', () => {
    expect(parseCsv('a,b\n1,2\n\n\n').rows).toEqual([['1', '2']]);
    expect(code('a,b\n1,2\n\n3,4\n')).toBe('malformed_csv');
  });

  it.each([
    ['rows of unequal length', 'a,b\n1,2\n3\n'],
    ['a repeated column', 'a,b,a\n1,2,3\n'],
    ['an open quote', 'a,b\n"1,2\n'],
    ['text after a closing quote', 'a,b\n"1"x,2\n'],
    ['a quote within a cell', 'a,b\n1"2,3\n'],
  ])('refuses %s as malformed', (_, text) => {
    expect(code(text)).toBe('malformed_csv');
  });

  it('says so when there is no data row', () => {
    expect(code('')).toBe('empty_data');
    expect(code('a,b\n')).toBe('empty_data');
    expect(code('a,b')).toBe('empty_data');
  });
});
