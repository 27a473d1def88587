/**
 * The UCUM unit atoms that the laboratory's quantities are made of.
 *
 * Each is defined by a decimal and a UCUM expression of other atoms, so that factors stay exact fractions.
 * The conventional millimetre of mercury, 133.322387415 Pa, is used. UCUM rounds it to 133.322 Pa; the two differ
 * by 2.9e-6 in relative terms, and so do a Wood unit's factors (79.99343245 here, 79.9932 dyn.s/cm5 there).
 *
 * Source  The Unified Code for Units of Measure, tables of base and derived units; the gram stands in for UCUM's
 *         base unit of mass; the millimetre of mercury is 13.5951 × 980.665 dyn/cm2 / 10 (BIPM convention)
 */
export interface UnitAtom {
  /** Takes metric prefixes, as UCUM's column "metric" says. */
  readonly metric: boolean;
  /** Absent for a base unit, which is a dimension of its own. */
  readonly definition?: { readonly factor: string; readonly unit: string };
}

const base: UnitAtom = { metric: true };
const metric = (factor: string, unit: string): UnitAtom => ({ metric: true, definition: { factor, unit } });
const fixed = (factor: string, unit: string): UnitAtom => ({ metric: false, definition: { factor, unit } });

export const unitAtoms: ReadonlyMap<string, UnitAtom> = new Map([
  ['m', base],
  ['g', base],
  ['s', base],
  ['K', base],
  ['A', base],
  ['rad', base],
  ['mol', base],
  ['10*', fixed('10', '1')],
  ['10^', fixed('10', '1')],
  ['%', fixed('0.01', '1')],
  ['deg', fixed('0.0174532925199432957692', 'rad')],
  ['min', fixed('60', 's')],
  ['h', fixed('3600', 's')],
  ['d', fixed('86400', 's')],
  ['Hz', metric('1', '/s')],
  ['L', metric('0.001', 'm3')],
  ['l', metric('0.001', 'm3')],
  ['N', metric('1', 'kg.m/s2')],
  ['dyn', metric('0.00001', 'N')],
  ['gf', metric('9.80665', 'g.m/s2')],
  ['Pa', metric('1', 'N/m2')],
  ['bar', metric('100000', 'Pa')],
  ['m[Hg]', metric('133322.387415', 'Pa')],
  ['m[H2O]', metric('9806.65', 'Pa')],
  ['P', metric('0.1', 'Pa.s')],
  ['St', metric('0.0001', 'm2/s')],
  ['V', metric('1', 'kg.m2/s3/A')],
  ["[wood'U]", fixed('1', 'mm[Hg].min/L')],
]);

export const metricPrefixes: ReadonlyMap<string, string> = new Map([
  ['n', '1e-9'],
  ['u', '1e-6'],
  ['m', '1e-3'],
  ['c', '1e-2'],
  ['d', '1e-1'],
  ['da', '1e1'],
  ['h', '1e2'],
  ['k', '1e3'],
  ['M', '1e6'],
  ['G', '1e9'],
]);
