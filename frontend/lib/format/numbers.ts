const superscripts = '⁰¹²³⁴⁵⁶⁷⁸⁹';

interface NumberOptions {
  /** Digits after the point. */
  decimals?: number;
  /** Significant digits; used when `decimals` is not given. */
  significant?: number;
}

/** A computed number for reading: true minus, no grouping, no exponent in the range where people read plain numbers. */
export function formatNumber(value: number, { decimals, significant = 3 }: NumberOptions = {}): string {
  if (!Number.isFinite(value)) return 'no value';
  if (decimals !== undefined) return withMinus(value.toFixed(decimals));
  const magnitude = Math.abs(value);
  if (magnitude !== 0 && (magnitude < 1e-3 || magnitude >= 1e6)) return scientific(value, significant);
  return withMinus(plainDigits(value, significant));
}

/** A count: `5 000`, with a narrow space that does not break. */
export const formatCount = (count: number) => count.toString().replace(/\B(?=(\d{3})+$)/g, '\u202f');

/** A share as per cent: 0.61 → `61 %`. */
export const formatPercent = (share: number, decimals = 0) =>
  `${withMinus((share * 100).toFixed(decimals))}\u00a0%`;

/** A p-value: two digits down to 0.001, then as a power of ten. Never zero. */
export function formatP(p: number): string {
  if (p >= 0.001) return p >= 0.01 ? p.toFixed(2) : p.toFixed(4).replace(/0$/, '');
  return p === 0 ? '< 10⁻³⁰⁰' : scientific(p, 2);
}

/** A size in bytes: `1.2 MB`. */
export function formatBytes(bytes: number): string {
  const units = ['B', 'kB', 'MB', 'GB', 'TB'];
  const step = Math.min(Math.floor(Math.log10(Math.max(bytes, 1)) / 3), units.length - 1);
  return `${plainDigits(bytes / 1000 ** step, step === 0 ? 3 : 2)}\u00a0${units[step]}`;
}

/** A hash short enough to compare by eye: `9f2c41…e07b`. */
export const shortHash = (hash: string) =>
  hash.length <= 12 ? hash : `${hash.slice(0, 6)}…${hash.slice(-4)}`;

const withMinus = (digits: string) => digits.replace('-', '−');

/** `toPrecision` without its exponent form, so 1234 with 3 digits stays 1234: whole digits are never rounded away. */
function plainDigits(value: number, significant: number): string {
  const whole = Math.floor(Math.log10(Math.abs(value) || 1)) + 1;
  return value.toFixed(Math.max(0, Math.min(100, significant - whole)));
}

function scientific(value: number, significant: number): string {
  const [mantissa, exponent] = value.toExponential(significant - 1).split('e');
  const power = [...String(Math.abs(Number(exponent)))].map((digit) => superscripts[Number(digit)]).join('');
  return `${withMinus(mantissa!)} × 10${Number(exponent) < 0 ? '⁻' : ''}${power}`;
}
