/** A cell: text, a number that keeps its digits as written, or nothing. */
export type Cell = string | { number: string } | null;

/** Text that a spreadsheet would run is disarmed with an apostrophe; numbers never are (XC-11). */
function shown(cell: Cell): string {
  if (cell === null) return '';
  if (typeof cell !== 'string') return cell.number;
  const safe = /^[=+\-@\t\r\uff1d\uff0b\uff0d\uff20]/.test(cell) ? `'${cell}` : cell;
  return /[",\r\n]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe;
}

/** RFC 4180 with a header row, CRLF, UTF-8. */
export const csvText = (columns: readonly string[], rows: readonly (readonly Cell[])[]): string =>
  [columns.map((name) => shown(name)), ...rows.map((row) => row.map(shown))]
    .map((row) => `${row.join(',')}\r\n`)
    .join('');
