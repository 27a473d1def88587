import { mean, standardDeviation } from './moments.ts';
import type { Row } from './result.ts';

/** Areas under the dose–response curves of subjects. */
export interface Areas {
  /** subject, n_points, auc, incremental_auc; both null for a subject without the lowest or highest dose. */
  rows: (Row & { auc: number | null; incremental_auc: number | null })[];
  summary: Record<string, number | null>;
  incomplete: boolean;
}

/**
 * Linear trapezoids over each subject's doses, rows of one dose averaged first; the incremental area is above the
 * value at the lowest dose, computed on differences from it.
 */
export function areasUnderCurve(subjects: readonly string[], x: Float64Array, y: Float64Array): Areas {
  const lowest = x.reduce((a, b) => Math.min(a, b), Infinity);
  const highest = x.reduce((a, b) => Math.max(a, b), -Infinity);
  const rows = [...curvesOf(subjects, x, y)].map(([subject, values]) => {
    const doses = [...values.keys()].sort((a, b) => a - b);
    const heights = doses.map((dose) => mean(values.get(dose)!));
    const full = doses.length >= 2 && doses[0] === lowest && doses[doses.length - 1] === highest;
    const base = heights[0]!;
    return {
      subject,
      n_points: doses.length,
      auc: full ? trapezoids(doses, heights) : null,
      incremental_auc: full
        ? trapezoids(
            doses,
            heights.map((height) => height - base),
          )
        : null,
    };
  });
  const aucs = rows.flatMap((row) => (row.auc === null ? [] : [row.auc]));
  const incrementals = rows.flatMap((row) => (row.incremental_auc === null ? [] : [row.incremental_auc]));
  return {
    rows,
    summary: {
      auc_n: aucs.length,
      auc_mean: aucs.length > 0 ? mean(aucs) : null,
      auc_sd: aucs.length > 1 ? standardDeviation(aucs) : null,
      incremental_auc_mean: incrementals.length > 0 ? mean(incrementals) : null,
      incremental_auc_sd: incrementals.length > 1 ? standardDeviation(incrementals) : null,
    },
    incomplete: aucs.length < rows.length,
  };
}

/** Values by dose of each subject, in order of first row. */
function curvesOf(
  subjects: readonly string[],
  x: Float64Array,
  y: Float64Array,
): Map<string, Map<number, number[]>> {
  const curves = new Map<string, Map<number, number[]>>();
  subjects.forEach((subject, i) => {
    const curve = curves.get(subject) ?? new Map<number, number[]>();
    curve.set(x[i]!, [...(curve.get(x[i]!) ?? []), y[i]!]);
    curves.set(subject, curve);
  });
  return curves;
}

function trapezoids(x: readonly number[], heights: readonly number[]): number {
  let sum = 0;
  for (let i = 1; i < x.length; i += 1) sum += ((x[i]! - x[i - 1]!) * (heights[i]! + heights[i - 1]!)) / 2;
  return sum;
}
