import { SignalError } from './signal-error.ts';
import type { Signal } from './signal.ts';
import { convert, sameDimension } from '../units/convert.ts';
import { parseUnit } from '../units/parse-unit.ts';

/** The columns of a record, as signals share its times. */
export interface SignalRecord {
  /** The signal of the column whose name holds the first word found; `undefined` where none does. */
  readonly signal: (words: readonly string[]) => Signal | undefined;
}

const plainUnits: Readonly<Record<string, string>> = {
  mmHg: 'mm[Hg]',
  cmH2O: 'cm[H2O]',
  percent: '%',
  pct: '%',
};

/**
 * Reads a record: one header row, the time first among columns named time or t, units after an underscore or in brackets.
 *
 * Formula  `time_s,arterial_pressure_mmHg` or `time [s],volume [%]`; units UCUM or plain (mmHg, cmH2O, percent)
 * Units    times brought to s
 * Shape    rows in order; an empty cell is a missing sample of its column
 * Domain   as many cells as columns in each row; numbers with a decimal point; times strictly rising
 * Errors   SignalError with the row, numbered as in the file (the header is row 1)
 * Source   RFC 4180 for the separators; numbers need no quotes
 */
export function parseRecord(text: string): SignalRecord {
  const lines = text.replace(/^\uFEFF/, '').split(/\r?\n/);
  while (lines.length > 0 && lines.at(-1)!.trim() === '') lines.pop();
  const columns = (lines[0] ?? '').split(',').map((name) => name.trim().replace(/^"(.*)"$/, '$1'));
  if (lines.length < 2) throw new SignalError('empty_data', 'The record has no data rows.');
  const cells = columns.map(() => new Float64Array(lines.length - 1));
  for (let row = 1; row < lines.length; row++) readRow(lines[row]!, row, columns, cells);
  const timeColumn = columns.findIndex((name) => /^(time|t)\b|^(time|t)_/i.test(name));
  if (timeColumn < 0) throw new SignalError('missing_column', 'No column is named time.');
  const times = risingTimes(cells[timeColumn]!, unitOf(columns[timeColumn]!));
  return {
    signal(words) {
      const named = (word: string) =>
        columns.findIndex((name, index) => index !== timeColumn && name.toLowerCase().includes(word));
      const found = words.map(named).find((index) => index >= 0);
      return found === undefined ? undefined : withoutMissing(times, cells[found]!, unitOf(columns[found]!));
    },
  };
}

function readRow(
  line: string,
  row: number,
  columns: readonly string[],
  cells: readonly Float64Array[],
): void {
  let from = 0;
  for (let column = 0; column < columns.length; column++) {
    const comma = line.indexOf(',', from);
    const isLast = column === columns.length - 1;
    if (comma < 0 !== isLast) {
      throw new SignalError('malformed_csv', `Row ${row + 1} has not ${columns.length} cells.`, row + 1);
    }
    const cell = line.slice(from, isLast ? undefined : comma).trim();
    const value = cell === '' ? NaN : Number(cell);
    if (cell !== '' && !Number.isFinite(value)) {
      throw new SignalError(
        'non_numeric_cell',
        `Row ${row + 1}, column ${columns[column]!}: not a number.`,
        row + 1,
      );
    }
    cells[column]![row - 1] = value;
    from = comma + 1;
  }
}

/** UCUM code of a column: after its last underscore, or in brackets. */
function unitOf(column: string): string {
  const written = /[[(](.+)[\])]$/.exec(column)?.[1] ?? /_([^_]+)$/.exec(column)?.[1];
  if (written === undefined) {
    throw new SignalError(
      'unknown_unit',
      `Column ${column} states no unit: name it like ${column}_mmHg or ${column} [s].`,
    );
  }
  const unit = plainUnits[written] ?? written;
  try {
    parseUnit(unit);
  } catch {
    throw new SignalError('unknown_unit', `The unit ${written} of column ${column} is not understood.`);
  }
  return unit;
}

function risingTimes(raw: Float64Array, unit: string): Float64Array {
  if (!sameDimension(unit, 's')) throw new SignalError('unit_mismatch', `Time cannot be in ${unit}.`);
  const factor: number = convert(1, unit, 's');
  const times = factor === 1 ? raw : raw.map((value) => value * factor);
  for (let i = 0; i < times.length; i++) {
    if (Number.isNaN(times[i])) throw new SignalError('non_numeric_cell', `Row ${i + 2} has no time.`, i + 2);
    if (i > 0 && times[i]! <= times[i - 1]!) {
      throw new SignalError('time_not_rising', `Row ${i + 2} is not later than the row before it.`, i + 2);
    }
  }
  return times;
}

function withoutMissing(times: Float64Array, values: Float64Array, unit: string): Signal {
  if (!values.some(Number.isNaN)) return { times, values, unit };
  const present = (_: number, index: number) => !Number.isNaN(values[index]);
  return { times: times.filter(present), values: values.filter(present), unit };
}
