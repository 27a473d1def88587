/** An exact fraction of integers in lowest terms; the denominator is above 0. */
export interface Rational {
  readonly numerator: bigint;
  readonly denominator: bigint;
}

export const one: Rational = { numerator: 1n, denominator: 1n };

/** Reads a decimal such as '133.322387415' or '1e-3' without passing through a binary float. */
export function rational(decimal: string): Rational {
  const [mantissa = '', exponent = '0'] = decimal.split('e');
  const [whole = '', fraction = ''] = mantissa.split('.');
  const shift = Number(exponent) - fraction.length;
  const digits = BigInt(whole + fraction);
  return shift >= 0 ? reduced(digits * 10n ** BigInt(shift), 1n) : reduced(digits, 10n ** BigInt(-shift));
}

export function product(a: Rational, b: Rational): Rational {
  return reduced(a.numerator * b.numerator, a.denominator * b.denominator);
}

export function quotient(a: Rational, b: Rational): Rational {
  return reduced(a.numerator * b.denominator, a.denominator * b.numerator);
}

export function power(base: Rational, exponent: number): Rational {
  const positive = {
    numerator: base.numerator ** BigInt(Math.abs(exponent)),
    denominator: base.denominator ** BigInt(Math.abs(exponent)),
  };
  return exponent >= 0 ? positive : quotient(one, positive);
}

function reduced(numerator: bigint, denominator: bigint): Rational {
  const divisor = greatestCommonDivisor(numerator < 0n ? -numerator : numerator, denominator);
  return { numerator: numerator / divisor, denominator: denominator / divisor };
}

function greatestCommonDivisor(a: bigint, b: bigint): bigint {
  return b === 0n ? a : greatestCommonDivisor(b, a % b);
}
