import { AnalysisError } from '../core/analysis-error.ts';
import { gatherCells, indexIn, outcomeValues, requireSubjects } from '../core/cells.ts';
import { isConstantOnGrid, roundingGrid } from '../core/grid.ts';
import { required, type Plan } from '../core/plan.ts';
import type { DropReason, Dropped } from '../core/result.ts';
import type { Table } from '../core/table.ts';
import { subjectValues } from '../variance/subject-values.ts';

/** Subjects with follow-up, baseline, covariates and group. */
export interface ChangeData {
  readonly followUp: Float64Array;
  readonly baseline: Float64Array;
  readonly covariates: readonly Float64Array[];
  /** Null without `between`. */
  readonly groups: { readonly levels: readonly string[]; readonly positions: Int32Array } | null;
  readonly dropped: Dropped[];
}

/** Reads the subjects of an analysis of covariance, with the checks of the contract in their order. */
export function changeData(plan: Plan, table: Table): ChangeData {
  const {
    outcome,
    subject,
    condition,
    levels: wanted,
  } = required(plan, 'outcome', 'subject', 'condition', 'levels');
  table.numbers(outcome);
  const covariateColumns = (plan.covariates ?? []).map((column) => table.numbers(column));
  const values = outcomeValues(plan, table);
  const rowSubjects = table.keys(subject);
  const conditions = table.keys(condition);
  const levels = table.levels(condition, wanted);
  const between = plan.between?.[0];
  const groupLevels = between === undefined ? null : table.levels(between, plan.factor_levels?.[between]);
  if (groupLevels !== null && groupLevels.length < 2) throw new AnalysisError('level_missing');
  const cells = gatherCells(plan, {
    subjects: rowSubjects,
    cellOf: indexIn(levels, conditions),
    values,
    cellCount: 2,
  });
  const labels =
    between === undefined ? null : subjectValues(cells.subjects, rowSubjects, table.text(between));
  const covariates = covariateColumns.map((column) => subjectValues(cells.subjects, rowSubjects, column));
  const used: number[] = [];
  const dropped: Dropped[] = [];
  cells.subjects.forEach((name, i) => {
    const reason = reasonToDrop(
      cells.values[i]!,
      labels?.[i],
      covariates.map((column) => column[i]!),
      groupLevels,
    );
    if (reason === null) used.push(i);
    else if (reason !== 'ignored') dropped.push({ subject: name, reason });
  });
  const groups =
    groupLevels === null
      ? null
      : {
          levels: groupLevels,
          positions: indexIn(
            groupLevels,
            used.map((i) => labels![i]!),
          ),
        };
  requireSubjects(used.length, 3);
  groups?.levels.forEach((_, position) =>
    requireSubjects(groups.positions.filter((g) => g === position).length, 2),
  );
  const baseline = Float64Array.from(used, (i) => cells.values[i]![1]!);
  if (isConstantOnGrid(baseline, roundingGrid(baseline))) throw new AnalysisError('zero_variance');
  return {
    followUp: Float64Array.from(used, (i) => cells.values[i]![0]!),
    baseline,
    covariates: covariates.map((column) => Float64Array.from(used, (i) => column[i]!)),
    groups,
    dropped,
  };
}

/** Why a subject is left out, `ignored` for a group that is not listed, null when it is used. */
function reasonToDrop(
  cells: Float64Array,
  label: string | null | undefined,
  covariates: readonly (number | null)[],
  groupLevels: readonly string[] | null,
): DropReason | 'ignored' | null {
  if (cells.some(Number.isNaN)) return 'incomplete';
  if (label === null) return 'missing_between';
  if (label !== undefined && !groupLevels!.includes(label)) return 'ignored';
  return covariates.includes(null) ? 'missing_covariate' : null;
}
