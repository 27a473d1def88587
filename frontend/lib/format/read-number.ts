/** What a person wrote where a number is wanted. */
export type ReadNumber =
  | { kind: 'blank' }
  /** A plain number; `written` keeps its digits, `118.50` and all (DE-07). */
  | { kind: 'number'; value: number; written: string }
  /** It could mean a number: the person chooses among the readings, nothing is guessed. */
  | { kind: 'ask'; readings: string[] }
  | { kind: 'text' };

const plain = /^[+-]?\d+(\.\d+)?$/;

/**
 * Reads a number as written. A point is the decimal sign; `5,50`, `1.234,5` and `.5` are recognised and asked
 * about, never silently reinterpreted.
 */
export function readNumber(text: string): ReadNumber {
  const written = text.trim().replace(/^[−–]/, '-');
  if (written === '') return { kind: 'blank' };
  if (plain.test(written)) return { kind: 'number', value: Number(written), written };
  const readings = possibleReadings(written);
  return readings.length > 0 ? { kind: 'ask', readings } : { kind: 'text' };
}

function possibleReadings(written: string): string[] {
  const sign = /^[+-]/.exec(written)?.[0] ?? '';
  const digits = written.slice(sign.length).replace(/[\s\u00a0\u202f']/g, '');
  const readings = candidates(digits).map((reading) => sign + reading);
  return [...new Set(readings)].filter((reading) => plain.test(reading));
}

function candidates(digits: string): string[] {
  if (/^\.\d+$/.test(digits)) return [`0${digits}`];
  if (/^\d+\.$/.test(digits)) return [digits.slice(0, -1)];
  if (/^,\d+$/.test(digits)) return [`0.${digits.slice(1)}`];
  if (/^\d+$/.test(digits)) return [digits];
  // Points group, the comma divides: 1.234,5.
  if (/^\d{1,3}(\.\d{3})+,\d+$/.test(digits)) return [digits.replaceAll('.', '').replace(',', '.')];
  // Commas group, the point divides: 1,234.5.
  if (/^\d{1,3}(,\d{3})+\.\d+$/.test(digits)) return [digits.replaceAll(',', '')];
  // One comma before three digits may be either.
  if (/^\d{1,3},\d{3}$/.test(digits)) return [digits.replace(',', '.'), digits.replace(',', '')];
  if (/^\d{1,3}(,\d{3})+$/.test(digits)) return [digits.replaceAll(',', '')];
  if (/^\d+,\d+$/.test(digits)) return [digits.replace(',', '.')];
  return [];
}
