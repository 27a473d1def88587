import { atoms, customary, prefixes } from './unit-names.ts';

interface Factor {
  symbol: string;
  one: string;
  many: string;
  power: number;
}

const superscripts = '⁰¹²³⁴⁵⁶⁷⁸⁹';
const ordinals: Record<number, string> = { 4: 'fourth', 5: 'fifth', 6: 'sixth' };

/** A UCUM code as it is written at the bench: `mm[Hg]` → `mmHg`, `mL/min/dL` → `mL/min per 100 mL`. */
export function readableUnit(ucum: string): string {
  const known = customary[ucum];
  if (known) return known.readable;
  return ucum
    .split('/')
    .map((side) => side.split('.').filter(Boolean).map(written).join('·'))
    .join('/');
}

/** The same for the ear: `mm[Hg]` → `millimetres of mercury`, `/min` → `per minute`. */
export function spokenUnit(ucum: string): string {
  const known = customary[ucum];
  if (known) return known.spoken;
  return ucum
    .split('/')
    .map((side, at) => {
      const factors = side.split('.').filter(Boolean).map(factorOf);
      const words = factors
        .map((factor, index) => said(factor, at === 0 && index === factors.length - 1))
        .join(' ');
      return at === 0 ? words : `per ${words}`;
    })
    .filter(Boolean)
    .join(' ');
}

/** A value with its unit for a sentence: `118.50 mmHg`, `44 %`; the digits stay as written. */
export function withUnit(written: string, ucum: string | undefined): string {
  const unit = ucum ? readableUnit(ucum) : '';
  return unit === '' ? written : `${written}\u00a0${unit}`;
}

function written(code: string): string {
  const { symbol, power } = factorOf(code);
  return power === 1 ? symbol : symbol + superscript(power);
}

function said({ symbol, one, many, power }: Factor, plural: boolean): string {
  const word = plural ? many : one;
  if (power === 1) return word;
  if (one === 'ten') return `ten to the power of ${power < 0 ? 'minus ' : ''}${Math.abs(power)}`;
  if (power === 2) return `square ${word}`;
  if (power === 3) return `cubic ${word}`;
  if (power < 0) return `per ${said({ symbol, one, many, power: -power }, false)}`;
  return `${word} to the ${ordinals[power] ?? `${power}th`} power`;
}

/** One factor of a code: prefix, atom, exponent, or an annotation in braces, which reads as its own word. */
function factorOf(code: string): Factor {
  const annotation = /^\{([^}]*)\}$/.exec(code);
  if (annotation) return { symbol: annotation[1]!, one: annotation[1]!, many: annotation[1]!, power: 1 };
  const bare = code.replace(/\{[^}]*\}/g, '').replace(/[()]/g, '');
  const [, base = bare, exponent] = /^(10[*^]|.*?[^\d+-])([+-]?\d+)?$/.exec(bare) ?? [];
  const power = exponent ? Number(exponent) : 1;
  const atom = atoms[base];
  if (atom) return { symbol: atom.symbol, one: atom.one, many: atom.many ?? `${atom.one}s`, power };
  const prefix = prefixes[base.slice(0, 1)];
  const rest = atoms[base.slice(1)];
  if (prefix && rest) {
    const many = rest.many ?? `${rest.one}s`;
    return {
      symbol: prefix.symbol + rest.symbol,
      one: prefix.spoken + rest.one,
      many: prefix.spoken + many,
      power,
    };
  }
  return { symbol: bare, one: bare, many: bare, power: 1 };
}

const superscript = (power: number) =>
  (power < 0 ? '⁻' : '') + [...String(Math.abs(power))].map((digit) => superscripts[Number(digit)]).join('');
