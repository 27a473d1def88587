import { mean } from '../core/moments.ts';

/** A categorical column: `codes[row]` is a position in `levels`; the first level is the reference. */
export interface Factor {
  readonly kind: 'factor';
  readonly name: string;
  readonly levels: readonly string[];
  readonly codes: Int32Array;
}

/** A numeric column. */
export interface Covariate {
  readonly kind: 'covariate';
  readonly name: string;
  readonly values: Float64Array;
}

export type Variable = Factor | Covariate;

/** A covariate enters the columns as (value − origin) / unit. */
interface CovariateScale {
  readonly origin: number;
  readonly unit: number;
}

/**
 * A term and its columns, at `offset` … `offset + size − 1` of the design. Columns run over the levels of the term's
 * factors, the first factor fastest; a column is the product of level indicators and covariates.
 */
export interface DesignTerm {
  readonly key: string;
  /** Column names joined by ` × `. */
  readonly name: string;
  readonly variables: readonly Variable[];
  /** Levels of each factor that have a column: all but the reference, or all (`isFull`). */
  readonly levels: ReadonlyMap<string, readonly number[]>;
  readonly offset: number;
  readonly size: number;
}

/** The fixed part of a model: intercept and terms, in columns of order one. */
export interface FixedDesign {
  /** The intercept first. */
  readonly terms: readonly DesignTerm[];
  readonly byKey: ReadonlyMap<string, DesignTerm>;
  readonly scales: ReadonlyMap<string, CovariateScale>;
  readonly columns: readonly Float64Array[];
  /** `intercept`, `column`, `column = level`, joined by ` × `. */
  readonly names: readonly string[];
}

/** Identifies a set of variables. */
export function termKey(variables: readonly Variable[]): string {
  return JSON.stringify(variables.map((variable) => variable.name).sort());
}

/** The variables but one. */
export function without(variables: readonly Variable[], dropped: Variable): Variable[] {
  return variables.filter((variable) => variable !== dropped);
}

/**
 * Builds the columns of terms over rows.
 *
 * Factors are coded by indicators of all levels but the first. In a term whose part without the factor is not in the
 * model, all levels have a column: a slope for each group where there is no common slope. Covariates are centred and
 * scaled where the model stays the same by that, so that far origins and odd units cost no digits.
 *
 * Shape   each term a list of variables; they are taken in order of their first appearance over all terms
 * Source  Chambers and Hastie 1992, Statistical Models in S, section 2.3 (coding by margins)
 */
export function fixedDesign(rows: number, termVariables: readonly (readonly Variable[])[]): FixedDesign {
  const order = [...new Set(termVariables.flat())];
  const sets = [[], ...termVariables.map((set) => order.filter((variable) => set.includes(variable)))];
  const keys = new Set(sets.map(termKey));
  const scales = new Map(
    order.flatMap((variable) =>
      variable.kind === 'factor' ? [] : [[variable.name, scaleOf(variable, sets, keys)] as const],
    ),
  );
  const terms: DesignTerm[] = [];
  for (const variables of sets) {
    const last = terms.at(-1);
    terms.push(designTerm(variables, keys, last === undefined ? 0 : last.offset + last.size));
  }
  return {
    terms,
    byKey: new Map(terms.map((term) => [term.key, term])),
    scales,
    columns: terms.flatMap((term) => termColumns(rows, term, scales)),
    names: terms.flatMap((term) => combinations(term).map((levels) => columnName(term, levels))),
  };
}

function designTerm(variables: readonly Variable[], keys: ReadonlySet<string>, offset: number): DesignTerm {
  const levels = new Map<string, readonly number[]>();
  for (const variable of variables) {
    if (variable.kind !== 'factor') continue;
    const isFull = !keys.has(termKey(without(variables, variable)));
    levels.set(
      variable.name,
      variable.levels.flatMap((_, level) => (isFull || level > 0 ? [level] : [])),
    );
  }
  const size = [...levels.values()].reduce((product, list) => product * list.length, 1);
  const name = variables.map((variable) => variable.name).join(' × ');
  return { key: termKey(variables), name, variables, levels, offset, size };
}

function scaleOf(
  covariate: Covariate,
  sets: readonly Variable[][],
  keys: ReadonlySet<string>,
): CovariateScale {
  const { values } = covariate;
  const canShift = sets.every(
    (set) => !set.includes(covariate) || keys.has(termKey(without(set, covariate))),
  );
  const origin = canShift && values.length > 0 ? mean(values) : 0;
  let squares = 0;
  for (const value of values) squares += (value - origin) ** 2;
  const unit = Math.sqrt(squares / values.length);
  return { origin, unit: unit > 0 ? unit : 1 };
}

/** The levels of each column of a term, one position a factor in the order of `term.levels`. */
export function combinations(term: DesignTerm): number[][] {
  return [...term.levels.values()].reduce<number[][]>(
    (found, levels) => levels.flatMap((level) => found.map((combination) => [...combination, level])),
    [[]],
  );
}

function columnName(term: DesignTerm, levels: readonly number[]): string {
  if (term.variables.length === 0) return 'intercept';
  const factors = [...term.levels.keys()];
  return term.variables
    .map((variable) =>
      variable.kind === 'factor'
        ? `${variable.name} = ${variable.levels[levels[factors.indexOf(variable.name)]!]!}`
        : variable.name,
    )
    .join(' × ');
}

function termColumns(
  rows: number,
  term: DesignTerm,
  scales: ReadonlyMap<string, CovariateScale>,
): Float64Array[] {
  const product = new Float64Array(rows).fill(1);
  for (const variable of term.variables) {
    if (variable.kind !== 'covariate') continue;
    const { origin, unit } = scales.get(variable.name)!;
    for (let row = 0; row < rows; row += 1) product[row]! *= (variable.values[row]! - origin) / unit;
  }
  const factors = term.variables.filter((variable) => variable.kind === 'factor');
  return combinations(term).map((levels) => {
    const column = Float64Array.from(product);
    factors.forEach(({ codes }, f) => {
      for (let row = 0; row < rows; row += 1) if (codes[row] !== levels[f]) column[row] = 0;
    });
    return column;
  });
}
