import { AnalysisError } from './analysis-error.ts';
import { parseCsv, type CsvFile } from './parse-csv.ts';

const numberPattern = /^[+-]?(\d+\.?\d*|\.\d+)([eE][+-]?\d+)?$/;

/**
 * The data of an analysis by column. Methods ask in the contract's order of checks: columns, numbers, sign, keys,
 * levels, duplicates. Each question looks at every row of the file and complains about the first bad one.
 *
 *   table.size                      number of data rows
 *   table.rowNumber(i)              number in the file of data row i (0-based): i + 2
 *   table.requireColumns([...])     unknown_column
 *   table.numbers('flow')           Float64Array, NaN where empty       (non_numeric_cell)
 *   table.positive('flow', values)  the same values, checked above 0    (non_positive_value)
 *   table.keys('subject')           string[], none empty                (missing_key)
 *   table.text('sex')               string[], '' where empty
 *   table.levels('c', wanted?)      the levels in order                 (level_missing)
 */
export class Table {
  readonly size: number;
  private readonly header: string[];
  private readonly rows: string[][];
  private readonly texts = new Map<string, string[]>();
  private readonly parsed = new Map<string, Float64Array>();

  constructor(file: CsvFile) {
    this.header = file.header;
    this.rows = file.rows;
    this.size = file.rows.length;
  }

  static ofCsv(csv: string): Table {
    return new Table(parseCsv(csv));
  }

  rowNumber(index: number): number {
    return index + 2;
  }

  requireColumns(columns: readonly string[]): void {
    for (const column of columns) {
      if (!this.header.includes(column)) throw new AnalysisError('unknown_column', { column });
    }
  }

  text(column: string): string[] {
    const known = this.texts.get(column);
    if (known) return known;
    this.requireColumns([column]);
    const at = this.header.indexOf(column);
    const cells = this.rows.map((row) => row[at]!);
    this.texts.set(column, cells);
    return cells;
  }

  numbers(column: string): Float64Array {
    const known = this.parsed.get(column);
    if (known) return known;
    const cells = this.text(column);
    const values = new Float64Array(cells.length);
    cells.forEach((cell, index) => {
      const value = cell === '' ? NaN : Number(cell);
      if (cell !== '' && (!numberPattern.test(cell) || !Number.isFinite(value))) {
        throw new AnalysisError('non_numeric_cell', { column, row: this.rowNumber(index) });
      }
      values[index] = value;
    });
    this.parsed.set(column, values);
    return values;
  }

  positive(column: string, values: Float64Array): Float64Array {
    const index = values.findIndex((value) => value <= 0);
    if (index >= 0) throw new AnalysisError('non_positive_value', { column, row: this.rowNumber(index) });
    return values;
  }

  keys(column: string): string[] {
    const cells = this.text(column);
    const index = cells.indexOf('');
    if (index >= 0) throw new AnalysisError('missing_key', { column, row: this.rowNumber(index) });
    return cells;
  }

  /** The wanted levels, each of which has to occur in the column, or all levels in order of first appearance. */
  levels(column: string, wanted?: readonly string[]): string[] {
    const present = new Set(this.text(column));
    present.delete('');
    if (!wanted) return [...present];
    const absent = wanted.find((level) => !present.has(level));
    if (absent !== undefined) throw new AnalysisError('level_missing', { column, level: absent });
    return [...wanted];
  }
}
