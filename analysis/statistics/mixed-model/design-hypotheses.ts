import { choleskyFactor } from '../../numerics/linear-algebra.ts';
import { mean } from '../core/moments.ts';
import {
  combinations,
  type Covariate,
  type DesignTerm,
  type Factor,
  type FixedDesign,
} from './fixed-design.ts';

/**
 * The rows of a type III test of a term: its columns when factors are coded sum-to-zero, covariates as they are.
 * Given as differences from the reference level, averaged over the factors of larger terms with the same covariates.
 */
export function typeThreeRows(
  design: FixedDesign,
  term: DesignTerm,
  weights: readonly Float64Array[],
): Float64Array[] {
  const p = design.columns.length;
  const factors = [...term.levels.keys()];
  const larger = design.terms.filter((other) => containsTerm(other, term));
  return combinations(term).map((levels) => {
    const row = new Float64Array(p);
    for (const other of larger) {
      const profiles = factorsOf(other).map((factor) => {
        const position = factors.indexOf(factor.name);
        if (position < 0) return averageProfile(factor);
        const isFull = term.levels.get(factor.name)!.includes(0);
        return factor.levels.map((_, level) => {
          if (level === levels[position]) return 1;
          return level === 0 && !isFull ? -1 : 0;
        });
      });
      combinations(other).forEach((columnLevels, position) => {
        const value = columnLevels.reduce((product, level, f) => product * profiles[f]![level]!, 1);
        weights[other.offset + position]!.forEach((weight, c) => (row[c]! += value * weight));
      });
    }
    return row;
  });
}

/**
 * Rows that test the columns of the only term in sequence: each column after what the later ones share with it.
 * They span what `typeThreeRows` spans; the degrees of freedom of several rows depend on the choice.
 *
 * Shape  crossProducts: X'X of the design, row-major
 */
export function sequentialRows(term: DesignTerm, crossProducts: Float64Array): Float64Array[] {
  const p = Math.sqrt(crossProducts.length);
  const l = choleskyFactor(crossProducts, p);
  if (typeof l === 'number')
    throw new RangeError('The cross-products of a full-rank design are positive definite.');
  return Array.from({ length: term.size }, (_, position) => {
    const i = term.offset + position;
    return Float64Array.from({ length: p }, (_unused, j) => (j < i ? 0 : l[j * p + i]! / l[i * p + i]!));
  });
}

/** Weights of the mean at given levels of some factors, others averaged with equal weights, covariates at their mean. */
export function meanWeights(design: FixedDesign, at: ReadonlyMap<string, number>): Float64Array {
  const row = new Float64Array(design.columns.length);
  for (const term of design.terms) {
    const profiles = factorsOf(term).map((factor) => {
      const level = at.get(factor.name);
      return level === undefined
        ? averageProfile(factor)
        : factor.levels.map((_, l) => (l === level ? 1 : 0));
    });
    const covariates = term.variables.reduce(
      (product, variable) => product * (variable.kind === 'covariate' ? scaledMean(design, variable) : 1),
      1,
    );
    combinations(term).forEach((levels, position) => {
      row[term.offset + position] = levels.reduce(
        (product, level, f) => product * profiles[f]![level]!,
        covariates,
      );
    });
  }
  return row;
}

/** Whether `other` is the term or contains it: the same covariates, at least its factors. */
function containsTerm(other: DesignTerm, term: DesignTerm): boolean {
  const covariates = (of: DesignTerm) => of.variables.filter((variable) => variable.kind === 'covariate');
  return (
    covariates(other).length === covariates(term).length &&
    term.variables.every((variable) => other.variables.includes(variable))
  );
}

function factorsOf(term: DesignTerm): Factor[] {
  return term.variables.filter((variable) => variable.kind === 'factor');
}

function averageProfile(factor: Factor): number[] {
  return factor.levels.map(() => 1 / factor.levels.length);
}

function scaledMean(design: FixedDesign, { name, values }: Covariate): number {
  const { origin, unit } = design.scales.get(name)!;
  return (mean(values) - origin) / unit;
}
