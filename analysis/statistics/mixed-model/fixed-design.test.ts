import { describe, expect, it } from 'vitest';
import { coefficientWeights, logColumnUnits } from './design-coefficients.ts';
import { meanWeights, typeThreeRows } from './design-hypotheses.ts';
import { fixedDesign, type Covariate, type Factor } from './fixed-design.ts';

const codes = Int32Array.of(0, 1, 2, 0, 1, 2, 0, 1, 2, 0, 1, 2);
const arm: Factor = { kind: 'factor', name: 'arm', levels: ['a', 'b', 'c'], codes };
const sex: Factor = {
  kind: 'factor',
  name: 'sex',
  levels: ['f', 'm'],
  codes: codes.map((_, row) => (row < 6 ? 0 : 1)),
};
const time: Covariate = {
  kind: 'covariate',
  name: 'time',
  values: Float64Array.from(codes, (_, row) => 100 + row ** 2),
};

/** The combination of columns that a row of coefficients on the data's scale stands for, evaluated at each row. */
function predictions(design: ReturnType<typeof fixedDesign>, coefficients: Float64Array): number[] {
  return Array.from(codes, (_, row) =>
    design.columns.reduce((sum, column, c) => sum + coefficients[c]! * column[row]!, 0),
  );
}

describe('columns', () => {
  it('are indicators of all levels but the first, the first factor of an interaction fastest', () => {
    const { names } = fixedDesign(12, [[arm], [sex], [arm, sex]]);
    expect(names).toEqual([
      'intercept',
      'arm = b',
      'arm = c',
      'sex = m',
      'arm = b × sex = m',
      'arm = c × sex = m',
    ]);
  });

  it('name the variables of an interaction in order of first appearance', () => {
    expect(fixedDesign(12, [[time], [arm], [arm, time]]).names.at(-1)).toBe('time × arm = c');
  });

  it('have all levels where the part without the factor is not in the model', () => {
    expect(fixedDesign(12, [[arm], [arm, time]]).names.slice(3)).toEqual([
      'arm = a × time',
      'arm = b × time',
      'arm = c × time',
    ]);
    expect(fixedDesign(12, [[time], [arm, time]]).names.slice(2)).toEqual([
      'time × arm = b',
      'time × arm = c',
    ]);
  });

  it('centre a covariate only where the model stays the same', () => {
    expect(fixedDesign(12, [[arm], [time], [arm, time]]).scales.get('time')!.origin).toBeCloseTo(
      100 + 506 / 12,
      10,
    );
    expect(fixedDesign(12, [[arm], [arm, time]]).scales.get('time')!.origin).toBeCloseTo(100 + 506 / 12, 10);
    expect(fixedDesign(12, [[sex], [arm, time]]).scales.get('time')!.origin).toBe(0);
  });
});

describe('coefficients on the data’s scale', () => {
  const models = [
    [[arm], [sex], [time], [arm, sex], [arm, time], [sex, time], [arm, sex, time]],
    [[arm], [arm, time]],
    [[time], [sex, time]],
  ];
  it('reproduce the columns of products of indicators and covariates as they are', () => {
    for (const terms of models) {
      const design = fixedDesign(12, terms);
      const weights = coefficientWeights(design);
      const p = design.columns.length;
      // Any coefficients of the design, and what they are on the data's scale.
      const inner = Float64Array.from({ length: p }, (_, c) => Math.cos(c + 1));
      const outer = weights.map((row) => row.reduce((sum, weight, c) => sum + weight * inner[c]!, 0));
      const unscaled = design.terms.flatMap((term) => {
        const factors = [...term.levels.keys()];
        return Array.from({ length: term.size }, (_, position) => {
          let rest = position;
          const levels = [...term.levels.values()].map((list) => {
            const level = list[rest % list.length]!;
            rest = Math.floor(rest / list.length);
            return level;
          });
          return (row: number) =>
            term.variables.reduce((product, variable) => {
              if (variable.kind === 'covariate') return product * variable.values[row]!;
              return product * (variable.codes[row] === levels[factors.indexOf(variable.name)] ? 1 : 0);
            }, 1);
        });
      });
      predictions(design, inner).forEach((value, row) => {
        const onDataScale = unscaled.reduce((sum, column, c) => sum + outer[c]! * column(row), 0);
        expect(onDataScale).toBeCloseTo(value, 9);
      });
    }
  });

  it('count the unit of a covariate once for each of its columns', () => {
    const design = fixedDesign(12, [[arm], [time], [arm, time]]);
    expect(logColumnUnits(design)).toBeCloseTo(3 * Math.log(design.scales.get('time')!.unit), 12);
  });
});

describe('hypotheses', () => {
  it('of type III average over the other factor and leave covariates at zero', () => {
    const design = fixedDesign(12, [[arm], [sex], [arm, sex]]);
    const rows = typeThreeRows(design, design.terms[1]!, coefficientWeights(design));
    expect(rows.map((row) => [...row])).toEqual([
      [0, 1, 0, 0, 0.5, 0],
      [0, 0, 1, 0, 0, 0.5],
    ]);
    const withTime = fixedDesign(12, [[sex], [time], [sex, time]]);
    const weights = coefficientWeights(withTime);
    expect(typeThreeRows(withTime, withTime.terms[1]!, weights)[0]).toEqual(weights[1]);
    const slope = typeThreeRows(withTime, withTime.terms[2]!, weights)[0]!;
    slope.forEach((weight, c) => expect(weight).toBeCloseTo(weights[2]![c]! + 0.5 * weights[3]![c]!, 14));
  });

  it('of a mean take the other factors with equal weights', () => {
    const design = fixedDesign(12, [[arm], [sex], [time]]);
    const row = meanWeights(design, new Map([['sex', 1]]));
    [1, 1 / 3, 1 / 3, 1, 0].forEach((weight, c) => expect(row[c]).toBeCloseTo(weight, 14));
  });
});
