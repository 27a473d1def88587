import { mean } from '../core/moments.ts';
import type { ContrastSet } from './contrasts.ts';

/** Values of complete subjects: `cells[j][i]` of subject i in cell j, and the group of each subject. */
export interface RepeatedMeasures {
  readonly cells: readonly Float64Array[];
  /** Position of each subject's group, all zero without groups. */
  readonly groups: Int32Array;
  readonly groupCount: number;
}

/** Sums of squares of contrasts of the cells. */
export interface ContrastAnalysis {
  /** Number of contrasts. */
  readonly m: number;
  /** Of the mean of the group means (all groups with the same weight). */
  readonly ss: number;
  /** Of the differences between groups. */
  readonly ssByGroup: number;
  /** Error cross-products within groups, row-major m × m, and their trace. */
  readonly errorProducts: Float64Array;
  readonly ssError: number;
}

/**
 * The values about their grand mean, split into subject means and deviations from them: contrasts within subjects of
 * the deviations keep the digits that large differences between subjects would cost.
 */
export function splitBySubject({ cells, groups, groupCount }: RepeatedMeasures): {
  means: RepeatedMeasures;
  deviations: RepeatedMeasures;
} {
  const shift = mean(cells.flatMap((column) => [...column]));
  const centred = cells.map((column) => column.map((value) => value - shift));
  const n = groups.length;
  const means = Float64Array.from({ length: n }, (_, i) => {
    const reference = centred[0]![i]!;
    return reference + centred.reduce((sum, column) => sum + (column[i]! - reference), 0) / cells.length;
  });
  return {
    means: { cells: [means], groups, groupCount },
    deviations: {
      cells: centred.map((column) => column.map((value, i) => value - means[i]!)),
      groups,
      groupCount,
    },
  };
}

/** Analysis of variance of contrasts; type III for unequal groups. */
export function analyseContrasts(data: RepeatedMeasures, contrasts: ContrastSet): ContrastAnalysis {
  const { groups, groupCount } = data;
  const sizes = new Array<number>(groupCount).fill(0);
  for (const group of groups) sizes[group]! += 1;
  const m = contrasts.length;
  const harmonic = groupCount ** 2 / sizes.reduce((sum, size) => sum + 1 / size, 0);
  let ss = 0;
  let ssByGroup = 0;
  const residuals = contrasts.map((contrast) => {
    const values = contrastValues(data, contrast);
    const total = values.reduce((sum, value) => sum + value, 0) / values.length;
    const groupMeans = new Array<number>(groupCount).fill(0);
    values.forEach((value, i) => (groupMeans[groups[i]!]! += value / sizes[groups[i]!]!));
    ss += (groupMeans.reduce((sum, value) => sum + value, 0) / groupCount) ** 2 * harmonic;
    groupMeans.forEach((value, g) => (ssByGroup += sizes[g]! * (value - total) ** 2));
    return values.map((value, i) => value - groupMeans[groups[i]!]!);
  });
  const errorProducts = new Float64Array(m * m);
  residuals.forEach((a, i) =>
    residuals.forEach((b, j) => {
      errorProducts[i * m + j] = a.reduce((sum, value, k) => sum + value * b[k]!, 0);
    }),
  );
  const ssError = residuals.reduce((sum, _, i) => sum + errorProducts[i * m + i]!, 0);
  return { m, ss, ssByGroup, errorProducts, ssError };
}

function contrastValues({ cells, groups }: RepeatedMeasures, contrast: Float64Array): Float64Array {
  return Float64Array.from(groups, (_, i) =>
    cells.reduce((sum, column, j) => sum + contrast[j]! * column[i]!, 0),
  );
}
