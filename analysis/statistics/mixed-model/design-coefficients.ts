import {
  combinations,
  termKey,
  without,
  type DesignTerm,
  type FixedDesign,
  type Variable,
} from './fixed-design.ts';

/** A function of one variable: weights of a factor's levels, or constant + linear · value of a covariate. */
type Profile = readonly number[] | { readonly constant: number; readonly linear: number };

/**
 * The coefficients on the data's scale: for each column, weights on the coefficients of the design.
 *
 * A column of the design is a product of level indicators and scaled covariates; multiplied out it is a combination
 * of the columns with covariates as they are.
 */
export function coefficientWeights(design: FixedDesign): Float64Array[] {
  const p = design.columns.length;
  const rows = Array.from({ length: p }, () => new Float64Array(p));
  for (const term of design.terms) {
    combinations(term).forEach((levels, position) => {
      const column = term.offset + position;
      expand(design, term.variables, columnProfiles(design, term, levels), 1, (target, weight) => {
        rows[target]![column]! += weight;
      });
    });
  }
  return rows;
}

/** Sum of the logarithms of the units of all columns. */
export function logColumnUnits(design: FixedDesign): number {
  let sum = 0;
  for (const term of design.terms) {
    for (const { name } of term.variables) sum += term.size * Math.log(design.scales.get(name)?.unit ?? 1);
  }
  return sum;
}

/** Adds to the columns with covariates as they are what a product of profiles is made of. */
function expand(
  design: FixedDesign,
  variables: readonly Variable[],
  profiles: ReadonlyMap<string, Profile>,
  coefficient: number,
  add: (column: number, weight: number) => void,
): void {
  const term = design.byKey.get(termKey(variables))!;
  const rest = new Map(profiles);
  for (const variable of variables) {
    const { constant, remainder } = splitConstant(term, variable.name, rest.get(variable.name)!);
    if (constant !== 0) {
      const fewer = new Map(rest);
      fewer.delete(variable.name);
      expand(design, without(variables, variable), fewer, coefficient * constant, add);
    }
    rest.set(variable.name, remainder);
  }
  const factors = [...term.levels.keys()];
  combinations(term).forEach((levels, position) => {
    let weight = coefficient;
    for (const [name, profile] of rest) {
      weight *= 'linear' in profile ? profile.linear : profile[levels[factors.indexOf(name)]!]!;
    }
    if (weight !== 0) add(term.offset + position, weight);
  });
}

/** Takes out of a profile the constant that the term has no column for. */
function splitConstant(
  term: DesignTerm,
  name: string,
  profile: Profile,
): { constant: number; remainder: Profile } {
  if ('linear' in profile) return { constant: profile.constant, remainder: { ...profile, constant: 0 } };
  if (term.levels.get(name)!.includes(0)) return { constant: 0, remainder: profile };
  const reference = profile[0]!;
  return { constant: reference, remainder: profile.map((weight) => weight - reference) };
}

function columnProfiles(
  design: FixedDesign,
  term: DesignTerm,
  levels: readonly number[],
): Map<string, Profile> {
  const factors = [...term.levels.keys()];
  return new Map(
    term.variables.map((variable): [string, Profile] => {
      if (variable.kind === 'factor') {
        const level = levels[factors.indexOf(variable.name)];
        return [variable.name, variable.levels.map((_, l) => (l === level ? 1 : 0))];
      }
      const { origin, unit } = design.scales.get(variable.name)!;
      return [variable.name, { constant: -origin / unit, linear: 1 / unit }];
    }),
  );
}
