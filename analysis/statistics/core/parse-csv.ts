import { AnalysisError } from './analysis-error.ts';

/** The cells of a data file, trimmed. `rows[i]` is row i + 2 of the file: the header is row 1. */
export interface CsvFile {
  header: string[];
  rows: string[][];
}

/**
 * Reads a CSV file as the contract wants it: RFC 4180, one header row, cells trimmed, rows of equal length.
 *
 * Shape    comma, CRLF or LF, quotes doubled inside quotes; a byte-order mark and empty lines at the end are allowed
 * Errors   AnalysisError malformed_csv (unequal rows, repeated column, open or misplaced quote), empty_data
 */
export function parseCsv(text: string): CsvFile {
  const records = readRecords(text.charCodeAt(0) === 0xfeff ? text.slice(1) : text);
  const [header, ...rows] = records;
  if (header === undefined) throw new AnalysisError('empty_data');
  if (header.length > 1) while (rows.length > 0 && isBlank(rows[rows.length - 1]!)) rows.pop();
  rows.forEach((row, index) => {
    if (row.length !== header.length) {
      throw malformed(`Row ${index + 2} has ${row.length} cells, but the header has ${header.length}.`);
    }
  });
  const repeated = header.find((name, index) => header.indexOf(name) !== index);
  if (repeated !== undefined) throw malformed(`The column "${repeated}" occurs twice in the header.`);
  if (rows.length === 0) throw new AnalysisError('empty_data');
  return { header, rows };
}

function readRecords(text: string): string[][] {
  const records: string[][] = [];
  let record: string[] = [];
  let at = 0;
  while (at < text.length) {
    const cell = readCell(text, at);
    record.push(cell.value);
    at = cell.end;
    if (text[at] === ',') {
      at += 1;
      if (at === text.length) record.push('');
    } else {
      at += text[at] === '\r' ? 2 : 1;
      records.push(record);
      record = [];
    }
  }
  if (record.length > 0) records.push(record);
  return records;
}

/** One cell from `start`; `end` is where its comma or line end stands, or the end of the text. */
function readCell(text: string, start: number): { value: string; end: number } {
  let at = start;
  while (text[at] === ' ' || text[at] === '\t') at += 1;
  if (text[at] !== '"') {
    const end = endOfCell(text, at);
    const value = trim(text.slice(start, end));
    if (value.includes('"')) throw malformed('A quote stands inside a cell that is not quoted.');
    return { value, end };
  }
  const from = at + 1;
  let quote = from;
  for (;;) {
    quote = text.indexOf('"', quote);
    if (quote < 0) throw malformed('A quote is opened and never closed.');
    if (text[quote + 1] !== '"') break;
    quote += 2;
  }
  const end = endOfCell(text, quote + 1);
  if (trim(text.slice(quote + 1, end)) !== '') throw malformed('Text follows a closing quote.');
  return { value: trim(text.slice(from, quote).replaceAll('""', '"')), end };
}

function endOfCell(text: string, from: number): number {
  let at = from;
  while (
    at < text.length &&
    text[at] !== ',' &&
    text[at] !== '\n' &&
    !(text[at] === '\r' && text[at + 1] === '\n')
  ) {
    at += 1;
  }
  return at;
}

/** Spaces, tabs and line ends; a no-break space is not an empty cell. */
function trim(value: string): string {
  return value.replace(/^[ \t\r\n]+|[ \t\r\n]+$/g, '');
}

function isBlank(row: string[]): boolean {
  return row.length === 1 && row[0] === '';
}

function malformed(detail: string): AnalysisError {
  return new AnalysisError('malformed_csv', {}, detail);
}
