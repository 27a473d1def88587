import { mean } from '../core/moments.ts';
import { fitMixedModel } from '../mixed-model/fit.ts';
import { inferenceOf } from '../mixed-model/inference.ts';
import { effectTest } from '../variance/crossover-effects.ts';
import type { CrossoverData } from './crossover-2x2-data.ts';

/**
 * Mixed form of the cross-over: REML on every observed row, incomplete subjects included, with sequence, period and
 * treatment fixed and a random intercept of the subject.
 */
export function mixedCrossover(
  { subjects }: CrossoverData,
  confidence: number,
): { estimates: Record<string, number | null>; atBoundary: boolean } {
  const rows = subjects
    .map(({ isAb, outcome }) =>
      ([0, 1] as const).flatMap((period) =>
        Number.isNaN(outcome[period]) ? [] : [{ isAb, period, y: outcome[period] }],
      ),
    )
    .filter((visits) => visits.length > 0)
    .flatMap((visits, subject) => visits.map((visit) => ({ ...visit, subject })));
  const shift = mean(rows.map(({ y }) => y));
  const column = (value: (row: (typeof rows)[number]) => number) => Float64Array.from(rows, value);
  const subjectCount = rows.at(-1)!.subject + 1;
  const fit = fitMixedModel({
    outcome: column(({ y }) => y - shift),
    columns: [
      column(() => 1),
      column(({ isAb }) => (isAb ? 0 : 1)),
      column(({ period }) => (period === 0 ? 1 : 0)),
      column(({ isAb, period }) => (isAb === (period === 0) ? 1 : 0)),
    ],
    subjects: Int32Array.from(rows, ({ subject }) => subject),
    subjectCount,
    negligible: 0,
  });
  const inference = inferenceOf(fit);
  const test = (position: number) => {
    const { estimate, standardError, df } = inference.contrast(
      Float64Array.from({ length: 4 }, (_, i) => (i === position ? 1 : 0)),
    );
    return effectTest(estimate, standardError, df, confidence);
  };
  return {
    estimates: {
      ...Object.fromEntries(Object.entries(test(3)).map(([key, value]) => [`mixed_treatment_${key}`, value])),
      ...Object.fromEntries(Object.entries(test(2)).map(([key, value]) => [`mixed_period_${key}`, value])),
      mixed_n_subjects: subjectCount,
      mixed_n_observations: rows.length,
      between_subject_variance: fit.randomEffects.interceptVariance,
      within_subject_variance: fit.residualVariance,
    },
    atBoundary: fit.atBoundary,
  };
}
