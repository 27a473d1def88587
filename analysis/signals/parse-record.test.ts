import { describe, expect, it } from 'vitest';
import { parseRecord } from './parse-record.ts';

const arterial = (text: string) => parseRecord(text).signal(['arterial', 'pressure']);

describe('parseRecord', () => {
  it('reads units from the header, plain or UCUM', () => {
    for (const header of [
      'time_s,arterial_pressure_mmHg',
      't [s],pressure [mm[Hg]]',
      '"time (s)","pressure (mmHg)"',
    ]) {
      expect(arterial(`${header}\n0,80\n0.01,81.5\n`)).toMatchObject({
        unit: 'mm[Hg]',
        values: Float64Array.of(80, 81.5),
      });
    }
    expect(arterial('time_min,cuff_kPa,arterial_kPa\n0,1,10\n1,1,11')?.times).toEqual(Float64Array.of(0, 60));
  });

  it('takes an empty cell for a missing sample of its column', () => {
    const record = parseRecord('\uFEFFtime_s,volume_percent,cuff_mmHg\r\n0,1,0\r\n1,,0\r\n2,3,50\r\n');
    expect(record.signal(['volume'])).toMatchObject({ times: Float64Array.of(0, 2), unit: '%' });
    expect(record.signal(['cuff'])?.times).toHaveLength(3);
    expect(record.signal(['marker'])).toBeUndefined();
  });

  it.each<[string, string, number | undefined]>([
    ['empty_data', 'time_s,pressure_mmHg\n', undefined],
    ['empty_data', '', undefined],
    ['missing_column', 'seconds,pressure_mmHg\n0,1', undefined],
    ['malformed_csv', 'time_s,pressure_mmHg\n0,1\n1\n', 3],
    ['malformed_csv', 'time_s,pressure_mmHg\n0,1\n1,2,3\n', 3],
    ['non_numeric_cell', 'time_s,pressure_mmHg\n0,1\n1,abc\n', 3],
    ['non_numeric_cell', 'time_s,pressure_mmHg\n0,NaN\n', 2],
    ['non_numeric_cell', 'time_s,pressure_mmHg\n0,1\n,2\n', 3],
    ['time_not_rising', 'time_s,pressure_mmHg\n0,1\n1,2\n1,3\n', 4],
    ['time_not_rising', 'time_s,pressure_mmHg\n0,1\n2,2\n1,3\n', 4],
    ['unit_mismatch', 'time_mmHg,pressure_mmHg\n0,1', undefined],
    ['unknown_unit', 'time_s,pressure_furlong\n0,1', undefined],
    ['unknown_unit', 'time_s,pressure\n0,1', undefined],
  ])('refuses %s: %j', (code, text, row) => {
    expect(() => arterial(text)).toThrow(expect.objectContaining({ code, row }) as Error);
  });
});
