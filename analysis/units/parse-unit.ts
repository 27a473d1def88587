import { metricPrefixes, unitAtoms } from './atoms.ts';
import { UnitError } from './errors.ts';
import { one, power, product, rational } from './rational.ts';
import type { Rational } from './rational.ts';

/** A UCUM expression taken apart: an exact factor on base units, their exponents, and the terms as written. */
export interface Unit {
  readonly factor: Rational;
  readonly dimension: ReadonlyMap<string, number>;
  /** Prefixed atoms as written, with exponents: mL/min/dL is mL 1, min -1, dL -1. */
  readonly terms: ReadonlyMap<string, number>;
}

const dimensionless: Unit = { factor: one, dimension: new Map(), terms: new Map() };
const component = /^(10[*^]|(?:[A-Za-z%']|\[[^\][]+\])+)([+-]?\d{1,2})?(?!\d)/;
const longest = 80;
const known = new Map<string, Unit>();

/**
 * Reads a case-sensitive UCUM code made of the known atoms: products, quotients, powers, brackets, annotations, integers.
 *
 * Errors   UnitError 'unknown_unit' naming the part that is not understood
 * Source   UCUM 2.1, section 2 (grammar); '.' and '/' bind equally, from left to right
 *
 * @example parseUnit('mL/min/dL')
 */
export function parseUnit(code: string): Unit {
  let unit = known.get(code);
  if (!unit) {
    if (code.length > longest) throw unknownUnit(code.slice(0, longest), '');
    const [parsed, rest] = expression(code, code);
    if (rest !== '') throw unknownUnit(code, rest);
    unit = parsed;
    if (known.size < 1000) known.set(code, unit);
  }
  return unit;
}

/** The product of two units' powers, written terms added up so that what cancels disappears. */
export function multiplyUnits(a: Unit, b: Unit, exponent = 1): Unit {
  return {
    factor: product(a.factor, power(b.factor, exponent)),
    dimension: addExponents(a.dimension, b.dimension, exponent),
    terms: addExponents(a.terms, b.terms, exponent),
  };
}

/** Writes a unit's terms as a UCUM code, positive powers first: mL/dL, m-3, /s, 1. */
export function writeUnit({ terms }: Unit): string {
  const written = (exponent: number) => (exponent === 1 ? '' : String(exponent));
  const above = [...terms].filter(([, exponent]) => exponent > 0);
  const below = [...terms].filter(([, exponent]) => exponent < 0);
  if (above.length === 0 && below.length === 0) return '1';
  return (
    above.map(([atom, exponent]) => atom + written(exponent)).join('.') +
    below.map(([atom, exponent]) => `/${atom}${written(-exponent)}`).join('')
  );
}

function expression(text: string, code: string): [Unit, string] {
  let rest = text;
  let sign = 1;
  let unit = dimensionless;
  if (rest.startsWith('/')) [sign, rest] = [-1, rest.slice(1)];
  for (;;) {
    const [factor, after] = term(rest, code);
    unit = multiplyUnits(unit, factor, sign);
    rest = after;
    const operator = rest[0];
    if (operator !== '.' && operator !== '/') return [unit, rest];
    sign = operator === '/' ? -1 : 1;
    rest = rest.slice(1);
  }
}

function term(text: string, code: string): [Unit, string] {
  if (text.startsWith('(')) {
    const [inner, rest] = expression(text.slice(1), code);
    if (!rest.startsWith(')')) throw unknownUnit(code, text);
    return [inner, rest.slice(1)];
  }
  const annotation = /^\{[^{}]*\}/.exec(text);
  if (annotation) return [dimensionless, text.slice(annotation[0].length)];
  const found = component.exec(text);
  if (found) {
    const atom = multiplyUnits(dimensionless, prefixed(found[1]!, code), Number(found[2] ?? 1));
    return [atom, text.slice(found[0].length).replace(/^\{[^{}]*\}/, '')];
  }
  const integer = /^\d{1,9}(?!\d)/.exec(text);
  if (!integer || Number(integer[0]) === 0) throw unknownUnit(code, text);
  const terms = new Map(integer[0] === '1' ? [] : [[integer[0], 1]]);
  return [{ ...dimensionless, factor: rational(integer[0]), terms }, text.slice(integer[0].length)];
}

function prefixed(symbol: string, code: string): Unit {
  const whole = atomUnit(symbol);
  if (whole) return { ...whole, terms: new Map([[symbol, 1]]) };
  for (const length of [1, 2]) {
    const prefix = metricPrefixes.get(symbol.slice(0, length));
    const atom = symbol.slice(length);
    if (prefix !== undefined && unitAtoms.get(atom)?.metric) {
      const { factor, dimension } = atomUnit(atom)!;
      return { factor: product(rational(prefix), factor), dimension, terms: new Map([[symbol, 1]]) };
    }
  }
  throw unknownUnit(code, symbol);
}

function atomUnit(symbol: string): Omit<Unit, 'terms'> | undefined {
  const atom = unitAtoms.get(symbol);
  if (!atom) return undefined;
  if (!atom.definition) return { factor: one, dimension: new Map([[symbol, 1]]) };
  const { factor, dimension } = parseUnit(atom.definition.unit);
  return { factor: product(rational(atom.definition.factor), factor), dimension };
}

function addExponents(a: ReadonlyMap<string, number>, b: ReadonlyMap<string, number>, times: number) {
  const sum = new Map(a);
  for (const [symbol, exponent] of b) {
    const total = (sum.get(symbol) ?? 0) + times * exponent;
    if (total === 0) sum.delete(symbol);
    else sum.set(symbol, total);
  }
  return sum;
}

function unknownUnit(code: string, part: string): UnitError {
  return new UnitError(
    'unknown_unit',
    `The unit ${JSON.stringify(code)} is not understood${part === code || part === '' ? '' : ` at ${JSON.stringify(part)}`}.`,
    'Write a case-sensitive UCUM code, for example mL/min/dL, mm[Hg] or mPa.s.',
  );
}
