import { UnitError } from './errors.ts';
import { requireFinite } from './require.ts';
import { parseUnit } from './parse-unit.ts';
import { quantity } from './quantity.ts';
import type { Quantity } from './quantity.ts';
import { quotient } from './rational.ts';

/**
 * Converts a value between two UCUM units of the same dimension.
 *
 * Formula  value · f(from) / f(to) with exact fractions f; Cel = K − 273.15
 * Units    any known UCUM code; Cel stands alone, never inside a product
 * Domain   finite value
 * Errors   UnitError when the dimensions differ (a forearm resistance never becomes Wood units: the tissue volume
 *          does not cancel), DomainError when the value is not finite
 * Source   UCUM; mm[Hg] is the conventional 133.322387415 Pa, see `atoms.ts`
 *
 * @example convert(13.3, 'kPa', 'mm[Hg]') // 99.758
 */
export function convert<To extends string>(value: number, from: string, to: To): Quantity<To> {
  requireFinite('value', value);
  if (from === to) {
    if (from !== 'Cel') parseUnit(from);
    return quantity(value);
  }
  if (from === 'Cel') return quantity(convert(value + 273.15, 'K', to));
  if (to === 'Cel') return quantity(convert(value, from, 'K') - 273.15);
  if (!sameDimension(from, to)) throw otherDimension(from, to);
  const { numerator, denominator } = quotient(parseUnit(from).factor, parseUnit(to).factor);
  return quantity((value * Number(numerator)) / Number(denominator));
}

/** Whether two UCUM codes measure the same dimension; unknown codes throw `UnitError`. */
export function sameDimension(one: string, other: string): boolean {
  return signature(one) === signature(other);
}

function signature(code: string): string {
  const { dimension } = parseUnit(code === 'Cel' ? 'K' : code);
  return [...dimension]
    .map(([base, exponent]) => `${base}${exponent}`)
    .sort()
    .join('.');
}

function otherDimension(from: string, to: string): UnitError {
  return new UnitError(
    'unit_mismatch',
    `${from} cannot be converted to ${to}: the two measure different things.`,
    `Give the value in ${to} or in a unit of the same dimension.`,
  );
}
