/** A function of ours has no answer for these values; the message is for a person. */
export class NoAnswer extends Error {}

/** The numbers of a CEL list; refuses a list with fewer than `least`, by the name that the author wrote. */
export function numberList(caller: string, list: unknown, least: number): number[] {
  const numbers = [...(list as Iterable<number>)];
  if (numbers.length < least) {
    throw new NoAnswer(`${caller}() needs at least ${least === 1 ? 'one reading' : `${least} readings`}`);
  }
  return numbers;
}

export function mean(list: unknown): number {
  const numbers = numberList('mean', list, 1);
  const first = numbers[0] ?? 0;
  // About the first value, so that large numbers with small differences keep their digits.
  return first + numbers.reduce((sum, value) => sum + (value - first), 0) / numbers.length;
}

export function median(list: unknown): number {
  const sorted = numberList('median', list, 1).sort((a, b) => a - b);
  const upper = sorted[Math.floor(sorted.length / 2)] ?? NaN;
  const lower = sorted[Math.ceil(sorted.length / 2) - 1] ?? NaN;
  return lower + (upper - lower) / 2;
}

export function sampleStandardDeviation(list: unknown): number {
  const numbers = numberList('sd', list, 2);
  const centre = mean(numbers);
  return Math.sqrt(numbers.reduce((sum, value) => sum + (value - centre) ** 2, 0) / (numbers.length - 1));
}

/** Rounds on the decimal form, so that 1.005 to two decimals is 1.01 as it is written; halves go away from zero. */
export function roundTo(value: number, decimals: bigint): number {
  if (decimals < 0n || decimals > 12n) throw new NoAnswer('round() takes 0 to 12 decimals');
  if (!Number.isFinite(value)) return value;
  const whole = Math.round(shiftDecimal(Math.abs(value), Number(decimals)));
  return Math.sign(value) * shiftDecimal(whole, -Number(decimals));
}

/** Moves the decimal point in the written form: no multiplication, no new rounding error. */
function shiftDecimal(value: number, places: number): number {
  const [digits, exponent = '0'] = String(value).split('e');
  return Number(`${digits}e${Number(exponent) + places}`);
}

export function minutesBetween(from: string, to: string): number {
  return clockMinutes(to) - clockMinutes(from);
}

function clockMinutes(time: string): number {
  const parts = /^([01]\d|2[0-3]):([0-5]\d)$/.exec(time);
  if (!parts) throw new NoAnswer(`minutesBetween() needs clock times like 09:05, not "${time}"`);
  return Number(parts[1]) * 60 + Number(parts[2]);
}
