import { AnalysisError } from '../core/analysis-error.ts';
import { completeRows, gatherCells, indexIn, outcomeValues, requireSubjects } from '../core/cells.ts';
import { roundingGrid } from '../core/grid.ts';
import type { Method } from '../core/method.ts';
import { mean, standardDeviation } from '../core/moments.ts';
import { required, type Plan } from '../core/plan.ts';
import { warning, type Dropped } from '../core/result.ts';
import type { Table } from '../core/table.ts';
import { anovaRow } from '../variance/anova-row.ts';
import { averageContrast, levelContrasts } from '../variance/contrasts.ts';
import { sphericity } from '../variance/sphericity.ts';
import { subjectValues } from '../variance/subject-values.ts';
import { analyseContrasts, splitBySubject } from '../variance/within-effects.ts';

/** Analysis of variance with one factor within and one between subjects; type III sums of squares. */
export const mixedAnova: Method = {
  name: 'mixed_anova',
  run(plan, table) {
    const data = groupedCells(plan, table);
    const { within, between, columns, groups, dropped } = data;
    const n = groups.length;
    const k = columns.length;
    const groupCount = between.levels.length;
    const { means, deviations } = splitBySubject({ cells: columns, groups, groupCount });
    const ofMeans = analyseContrasts(means, averageContrast(1));
    const bySubject = { ss: k * ofMeans.ssByGroup, ssError: k * ofMeans.ssError };
    const withinEffect = analyseContrasts(deviations, levelContrasts(k));
    const negligible = (10 * roundingGrid(...columns)) ** 2 * n * k;
    if (Math.min(bySubject.ssError, withinEffect.ssError) <= negligible)
      throw new AnalysisError('zero_variance');
    const errors = bySubject.ssError + withinEffect.ssError;
    const nu = n - groupCount;
    const shape = sphericity(withinEffect.errorProducts, withinEffect.m, nu);
    const row = (ss: number, df: number, isWithin: boolean) =>
      anovaRow(
        { ss, df },
        isWithin ? { ss: withinEffect.ssError, df: withinEffect.m * nu } : { ss: bySubject.ssError, df: nu },
        { total: ss + errors, sphericity: isWithin ? shape : null },
      );
    return {
      n,
      dropped,
      estimates: { n_groups: groupCount },
      tables: {
        anova: [
          { effect: between.column, ...row(bySubject.ss, groupCount - 1, false) },
          { effect: within.column, ...row(withinEffect.ss, withinEffect.m, true) },
          {
            effect: `${between.column} × ${within.column}`,
            ...row(withinEffect.ssByGroup, withinEffect.m * (groupCount - 1), true),
          },
        ],
        cell_means: cellMeans(data),
      },
      warnings:
        withinEffect.m > 1 && shape.mauchlyW === null ? [warning('sphericity_test_not_available')] : [],
    };
  },
};

interface GroupedCells {
  within: { column: string; levels: string[] };
  between: { column: string; levels: string[] };
  /** One a within level, over the subjects used. */
  columns: Float64Array[];
  /** Position of each subject's group. */
  groups: Int32Array;
  dropped: Dropped[];
}

function groupedCells(plan: Plan, table: Table): GroupedCells {
  const fields = required(plan, 'subject', 'within', 'between');
  const [within, between] = [fields.within[0]!, fields.between[0]!];
  const values = outcomeValues(plan, table);
  const rowSubjects = table.keys(fields.subject);
  const cells = table.keys(within);
  const levels = table.levels(within, plan.factor_levels?.[within]);
  const groupLevels = table.levels(between, plan.factor_levels?.[between]);
  if (levels.length < 2 || groupLevels.length < 2) throw new AnalysisError('level_missing');
  const gathered = gatherCells(plan, {
    subjects: rowSubjects,
    cellOf: indexIn(levels, cells),
    values,
    cellCount: levels.length,
  });
  const labels = subjectValues(gathered.subjects, rowSubjects, table.text(between));
  const known = labels.map((label) => label !== null && groupLevels.includes(label));
  const ofKnown = completeRows({
    subjects: gathered.subjects.filter((_, i) => known[i]),
    values: gathered.values.filter((_, i) => known[i]),
  });
  const withoutGroup = gathered.subjects.filter((_, i) => labels[i] === null);
  const labelOf = new Map(gathered.subjects.map((subject, i) => [subject, labels[i]!]));
  const groups = indexIn(
    groupLevels,
    ofKnown.subjects.map((subject) => labelOf.get(subject)!),
  );
  for (const position of groupLevels.keys()) requireSubjects(groups.filter((g) => g === position).length, 2);
  return {
    within: { column: within, levels },
    between: { column: between, levels: groupLevels },
    columns: ofKnown.columns,
    groups,
    dropped: [
      ...ofKnown.dropped,
      ...withoutGroup.map((subject): Dropped => ({ subject, reason: 'missing_between' })),
    ],
  };
}

function cellMeans({ within, between, columns, groups }: GroupedCells) {
  return between.levels.flatMap((group, g) =>
    columns.map((column, j) => {
      const values = column.filter((_, i) => groups[i] === g);
      return {
        [between.column]: group,
        [within.column]: within.levels[j]!,
        n: values.length,
        mean: mean(values),
        sd: standardDeviation(values),
      };
    }),
  );
}
