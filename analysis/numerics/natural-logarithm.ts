import { requirePositive } from '../units/require.ts';

/** ln 2 in two parts: the first times any binary exponent is exact. */
const ln2High = 6.93147180369123816e-1;
const ln2Low = 1.9082149292705877e-10;
const bits = new DataView(new ArrayBuffer(8));

/**
 * Natural logarithm, rounded to the nearest double nearly always and the same on every engine.
 *
 * Math.log may differ between engines and from other software in its last digit. For values of 1e8 that differ by
 * little, differences of logarithms consist of last digits, so the transform of data uses this one.
 *
 * Formula  x = 2^e·m with m in [√½, √2); ln m = 2·atanh(s), s = (m − 1)/(m + 1); e·ln 2 and 2s are carried in two
 *          doubles each, the rest of the series in one
 * Domain   x finite and above 0
 * Errors   DomainError naming x
 * Accuracy 0.51 units in the last place
 * Source   Abramowitz & Stegun 1964, 4.1.28; the splitting after Dekker 1971, Numer Math 18:224-242
 */
export function naturalLogarithm(x: number): number {
  requirePositive('x', x);
  const { exponent, mantissa } = parts(x);
  const f = mantissa - 1;
  const denominator = 2 + f;
  const denominatorRest = f - (denominator - 2);
  const s = f / denominator;
  const sRest = (f - s * denominator - productRest(s, denominator) - s * denominatorRest) / denominator;
  const square = s * s;
  let series = 0;
  for (let k = 23; k >= 3; k -= 2) series = (series + 1 / k) * square;
  const high = exponent * ln2High;
  const sum = high + 2 * s;
  const back = sum - high;
  const lost = high - (sum - back) + (2 * s - back);
  return sum + (lost + (exponent * ln2Low + 2 * sRest + 2 * s * series));
}

function parts(x: number): { exponent: number; mantissa: number } {
  const scaled = x < 2.3e-308 ? x * 2 ** 54 : x;
  bits.setFloat64(0, scaled);
  let exponent = ((bits.getUint16(0) >> 4) & 0x7ff) - 1023;
  bits.setUint16(0, (bits.getUint16(0) & 0x800f) | (1023 << 4));
  let mantissa = bits.getFloat64(0);
  if (mantissa > Math.SQRT2) {
    mantissa /= 2;
    exponent += 1;
  }
  return { exponent: scaled === x ? exponent : exponent - 54, mantissa };
}

/** What the product of two doubles loses, exactly (Dekker). */
function productRest(a: number, b: number): number {
  const [aHigh, aLow] = halves(a);
  const [bHigh, bLow] = halves(b);
  return aHigh * bHigh - a * b + aHigh * bLow + aLow * bHigh + aLow * bLow;
}

function halves(value: number): [number, number] {
  const scaled = value * 134217729;
  const high = scaled - (scaled - value);
  return [high, value - high];
}
