import { AnalysisError } from '../core/analysis-error.ts';
import { completeCells } from '../core/cells.ts';
import { roundingGrid } from '../core/grid.ts';
import type { Method } from '../core/method.ts';
import { mean, standardDeviation } from '../core/moments.ts';
import { required } from '../core/plan.ts';
import { warning } from '../core/result.ts';
import { anovaRow } from '../variance/anova-row.ts';
import { averageContrast, levelContrasts } from '../variance/contrasts.ts';
import { pairwiseT } from '../variance/pairwise-t.ts';
import { sphericity } from '../variance/sphericity.ts';
import { analyseContrasts, splitBySubject, type RepeatedMeasures } from '../variance/within-effects.ts';

/**
 * One-way repeated-measures analysis of variance with both corrections for sphericity and pairwise paired t tests.
 *
 * Source   Greenhouse and Geisser 1959; Huynh and Feldt 1976; see `sphericity`
 */
export const oneWayRmAnova: Method = {
  name: 'one_way_rm_anova',
  run(plan, table) {
    const { condition } = required(plan, 'condition');
    const { levels, columns, dropped } = completeCells(plan, table);
    const n = columns[0]!.length;
    const { means, deviations } = splitBySubject({
      cells: columns,
      groups: new Int32Array(n),
      groupCount: 1,
    });
    refuseNoVariation(deviations, roundingGrid(...columns));
    const effect = analyseContrasts(deviations, levelContrasts(levels.length));
    const ss_subject = levels.length * analyseContrasts(means, averageContrast(1)).ssError;
    const row = anovaRow(
      { ss: effect.ss, df: effect.m },
      { ss: effect.ssError, df: effect.m * (n - 1) },
      {
        total: effect.ss + effect.ssError + ss_subject,
        sphericity: sphericity(effect.errorProducts, effect.m, n - 1),
      },
    );
    return {
      n,
      dropped,
      estimates: { ...row, ss_subject },
      tables: {
        anova: [{ effect: condition, ...row }],
        levels: levels.map((level, j) => {
          const sd = standardDeviation(columns[j]!);
          return { level, n, mean: mean(columns[j]!), sd, standard_error: sd / Math.sqrt(n) };
        }),
        pairwise: pairwiseT(levels, columns, plan),
      },
      warnings: effect.m > 1 && row.mauchly_w === null ? [warning('sphericity_test_not_available')] : [],
    };
  },
};

/** Errors: zero_variance when subject and level explain all values to ten steps of the grid. */
function refuseNoVariation({ cells }: RepeatedMeasures, grid: number): void {
  const isExplained = cells.every((column) => {
    const level = mean(column);
    return column.every((value) => Math.abs(value - level) <= 10 * grid);
  });
  if (isExplained) throw new AnalysisError('zero_variance');
}
