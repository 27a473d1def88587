import { AnalysisError } from '../core/analysis-error.ts';
import { completeRows, gatherCells, indexIn, outcomeValues, requireSubjects } from '../core/cells.ts';
import { roundingGrid } from '../core/grid.ts';
import type { Method } from '../core/method.ts';
import { mean, standardDeviation } from '../core/moments.ts';
import { required, type Plan } from '../core/plan.ts';
import { warning, type Dropped } from '../core/result.ts';
import type { Table } from '../core/table.ts';
import { anovaRow } from '../variance/anova-row.ts';
import { averageContrast, crossContrasts, levelContrasts } from '../variance/contrasts.ts';
import { pairwiseT } from '../variance/pairwise-t.ts';
import { sphericity } from '../variance/sphericity.ts';
import { analyseContrasts, splitBySubject } from '../variance/within-effects.ts';

/** Two-way repeated-measures analysis of variance: both factors within subjects, each effect with its own error. */
export const twoWayRmAnova: Method = {
  name: 'two_way_rm_anova',
  run(plan, table) {
    const { factors, columns, dropped } = factorialCells(plan, table);
    const [a, b] = factors;
    const n = columns[0]!.length;
    const { means, deviations } = splitBySubject({
      cells: columns,
      groups: new Int32Array(n),
      groupCount: 1,
    });
    const contrastsA = levelContrasts(a.levels.length);
    const contrastsB = levelContrasts(b.levels.length);
    const effects = [
      { effect: a.column, contrasts: crossContrasts(contrastsA, averageContrast(b.levels.length)) },
      { effect: b.column, contrasts: crossContrasts(averageContrast(a.levels.length), contrastsB) },
      { effect: `${a.column} × ${b.column}`, contrasts: crossContrasts(contrastsA, contrastsB) },
    ].map(({ effect, contrasts }) => ({ effect, ...analyseContrasts(deviations, contrasts) }));
    const negligible = (10 * roundingGrid(...columns)) ** 2 * n * columns.length;
    if (effects.some(({ ssError }) => ssError <= negligible)) throw new AnalysisError('zero_variance');
    const ss_subject = columns.length * analyseContrasts(means, averageContrast(1)).ssError;
    const errors = effects.reduce((sum, { ssError }) => sum + ssError, ss_subject);
    const anova = effects.map(({ effect, m, ss, ssError, errorProducts }) => ({
      effect,
      ...anovaRow(
        { ss, df: m },
        { ss: ssError, df: m * (n - 1) },
        { total: ss + errors, sphericity: sphericity(errorProducts, m, n - 1) },
      ),
    }));
    return {
      n,
      dropped,
      estimates: { ss_subject },
      tables: {
        anova,
        cell_means: columns.map((column, cell) => ({
          [a.column]: a.levels[Math.floor(cell / b.levels.length)]!,
          [b.column]: b.levels[cell % b.levels.length]!,
          n,
          mean: mean(column),
          sd: standardDeviation(column),
        })),
        pairwise: factors.flatMap((factor, position) =>
          pairwiseT(factor.levels, subjectMeans(columns, factors, position), plan).map((row) => ({
            factor: factor.column,
            ...row,
          })),
        ),
      },
      warnings: anova.some((row) => row.df_effect > 1 && row.mauchly_w === null)
        ? [warning('sphericity_test_not_available')]
        : [],
    };
  },
};

interface WithinFactor {
  column: string;
  levels: string[];
}

/** Complete subjects in the cells of two factors, the first varying slowest. */
function factorialCells(
  plan: Plan,
  table: Table,
): { factors: [WithinFactor, WithinFactor]; columns: Float64Array[]; dropped: Dropped[] } {
  const { subject, within } = required(plan, 'subject', 'within');
  const values = outcomeValues(plan, table);
  const subjects = table.keys(subject);
  const cells = within.map((column) => table.keys(column));
  const [a, b] = within.map((column) => ({
    column,
    levels: table.levels(column, plan.factor_levels?.[column]),
  })) as [WithinFactor, WithinFactor];
  if (a.levels.length < 2 || b.levels.length < 2) throw new AnalysisError('level_missing');
  const positionsA = indexIn(a.levels, cells[0]!);
  const positionsB = indexIn(b.levels, cells[1]!);
  const cellOf = positionsA.map((position, row) =>
    position < 0 || positionsB[row]! < 0 ? -1 : position * b.levels.length + positionsB[row]!,
  );
  const gathered = gatherCells(plan, {
    subjects,
    cellOf,
    values,
    cellCount: a.levels.length * b.levels.length,
  });
  const complete = completeRows(gathered);
  requireSubjects(complete.subjects.length, 2);
  return { factors: [a, b], columns: complete.columns, dropped: complete.dropped };
}

/** Each subject's mean at the levels of one factor over the levels of the other. */
function subjectMeans(
  columns: readonly Float64Array[],
  [a, b]: readonly [WithinFactor, WithinFactor],
  position: number,
): Float64Array[] {
  const levels = position === 0 ? a.levels : b.levels;
  return levels.map((_, level) => {
    const cells = columns.filter((_column, cell) => {
      return level === (position === 0 ? Math.floor(cell / b.levels.length) : cell % b.levels.length);
    });
    return cells[0]!.map((_value, i) => mean(cells.map((column) => column[i]!)));
  });
}
