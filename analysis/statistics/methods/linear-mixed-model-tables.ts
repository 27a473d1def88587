import { fUpperTail } from '../../numerics/f-distribution.ts';
import { adjustPValues } from '../core/adjust.ts';
import type { Plan } from '../core/plan.ts';
import type { Row } from '../core/result.ts';
import { contrastRow } from '../mixed-model/contrast-row.ts';
import { coefficientWeights } from '../mixed-model/design-coefficients.ts';
import { meanWeights, sequentialRows, typeThreeRows } from '../mixed-model/design-hypotheses.ts';
import type { MixedModelFit } from '../mixed-model/fit.ts';
import type { Factor, FixedDesign } from '../mixed-model/fixed-design.ts';
import type { FixedPartInference } from '../mixed-model/fixed-part-inference.ts';

/** A fitted plan; `shift` was subtracted from the outcome. */
export interface FittedPlan {
  readonly plan: Plan;
  readonly design: FixedDesign;
  readonly fit: MixedModelFit;
  readonly inference: FixedPartInference;
  readonly shift: number;
}

export function fixedEffectsTable({ plan, design, inference, shift }: FittedPlan): Row[] {
  return coefficientWeights(design).map((weights, column) => ({
    term: design.names[column]!,
    ...contrastRow(inference.contrast(weights), {
      confidence: plan.confidence,
      shift: column === 0 ? shift : 0,
    }),
  }));
}

export function varianceComponentsTable({ plan, fit }: FittedPlan): Row[] {
  const { interceptVariance, slopeVariance } = fit.randomEffects;
  const row = (component: string, variance: number) => ({ component, variance, sd: Math.sqrt(variance) });
  return [
    row('intercept', interceptVariance),
    ...(slopeVariance === null ? [] : [row(plan.random!.slopes![0]!, slopeVariance)]),
    row('residual', fit.residualVariance),
  ];
}

/** Type III F tests of the terms. */
export function anovaTable({ design, fit, inference }: FittedPlan): Row[] {
  const terms = design.terms.slice(1);
  const weights = coefficientWeights(design);
  return terms.map((term) => {
    const rows =
      terms.length > 1 ? typeThreeRows(design, term, weights) : sequentialRows(term, fit.crossProducts);
    const { f, df1, df2 } = inference.test(rows);
    const exists = f >= 0 && df2 > 0 && Number.isFinite(df2);
    return { term: term.name, df_1: df1, df_2: df2, f, p_value: exists ? fUpperTail(f, df1, df2) : null };
  });
}

/** Adjusted means of a factor and their contrasts, within each level of `by`. */
export function marginalTables(
  { plan, design, inference, shift }: FittedPlan,
  { factor, by, contrasts = 'pairwise' }: NonNullable<Plan['marginal_means']>,
): { marginal_means: Row[]; contrasts: Row[] } {
  const { confidence } = plan;
  const marginalMeans: Row[] = [];
  const contrastRows: Row[] = [];
  const levels = factorOf(design, factor).levels;
  const groups = by === undefined ? [null] : factorOf(design, by).levels;
  groups.forEach((group, position) => {
    const fixed: [string, number][] = by === undefined ? [] : [[by, position]];
    const label: Row = by === undefined ? {} : { [by]: group };
    const means = levels.map((_, level) => meanWeights(design, new Map([...fixed, [factor, level]])));
    means.forEach((weights, level) => {
      const { estimate, standard_error, df, ci_lower, ci_upper } = contrastRow(inference.contrast(weights), {
        confidence,
        shift,
      });
      const mean = { adjusted_mean: estimate, standard_error, df, ci_lower, ci_upper };
      marginalMeans.push({ ...label, [factor]: levels[level]!, ...mean });
    });
    const rows = pairsOfLevels(levels.length, contrasts).map(([first, second]) => ({
      ...label,
      level_1: levels[first]!,
      level_2: levels[second]!,
      ...contrastRow(inference.contrast(means[first]!.map((w, c) => w - means[second]![c]!)), { confidence }),
    }));
    const adjusted = adjustPValues(
      rows.map((row) => row.p_value),
      plan.adjust,
    );
    rows.forEach((row, i) => contrastRows.push({ ...row, p_adjusted: adjusted[i]! }));
  });
  return { marginal_means: marginalMeans, contrasts: contrastRows };
}

function pairsOfLevels(count: number, contrasts: 'pairwise' | 'versus_first'): [number, number][] {
  const positions = Array.from({ length: count }, (_, i) => i);
  if (contrasts === 'versus_first') return positions.slice(1).map((level) => [level, 0]);
  return positions.flatMap((first) =>
    positions.slice(first + 1).map((second): [number, number] => [first, second]),
  );
}

function factorOf(design: FixedDesign, name: string): Factor {
  const found = design.terms.flatMap((term) => term.variables).find((variable) => variable.name === name);
  if (found?.kind !== 'factor') throw new RangeError(`${name} is no factor of the design.`);
  return found;
}
