import { AnalysisError } from '../core/analysis-error.ts';
import { agreementLimits } from '../core/agreement-limits.ts';
import { outcomeValues, requireSubjects } from '../core/cells.ts';
import { mean, sumOfSquares, variance } from '../core/moments.ts';
import { oneWayBySubject } from '../core/one-way.ts';
import { required, type Plan } from '../core/plan.ts';
import type { Dropped, Outcome } from '../core/result.ts';
import type { Table } from '../core/table.ts';

/** Replicates of a value that does not change: Bland & Altman 1999, sections 5.1 and 5.2. */
export function replicatedConstant(plan: Plan, table: Table): Outcome {
  const { names, values, cellOf, subjects } = usedRows(plan, table);
  const lists = new Map(names.map((name) => [name, [[], []] as [number[], number[]]]));
  subjects.forEach((name, row) => {
    const level = cellOf[row]!;
    if (level >= 0 && !Number.isNaN(values[row]!)) lists.get(name)![level]!.push(values[row]!);
  });
  const allX = names.map((name) => Float64Array.from(lists.get(name)![0]));
  const allY = names.map((name) => Float64Array.from(lists.get(name)![1]));
  const kept = names.map((_, i) => allX[i]!.length > 0 && allY[i]!.length > 0);
  const x = allX.filter((_, i) => kept[i]);
  const y = allY.filter((_, i) => kept[i]);
  requireSubjects(x.length, 2);
  if ([x, y].some((groups) => groups.every((group) => group.length === 1))) {
    throw new AnalysisError('too_few_replicates');
  }
  const meanDifferences = x.map((group, i) => mean(group) - mean(y[i]!));
  const [withinX, withinY] = [pooledVariance(x), pooledVariance(y)];
  const ofMeans = variance(meanDifferences);
  const total = ofMeans + (1 - meanInverseSize(x)) * withinX + (1 - meanInverseSize(y)) * withinY;
  return {
    n: x.length,
    dropped: incomplete(names, kept),
    estimates: {
      ...agreementLimits(mean(meanDifferences), Math.sqrt(total), plan.limit_multiplier),
      variance_mean_difference: ofMeans,
      within_subject_variance_x: withinX,
      within_subject_variance_y: withinY,
      n_observations: [...x, ...y].reduce((sum, group) => sum + group.length, 0),
    },
  };
}

/** Linked pairs of a value that changes: Bland & Altman 2007, J Biopharm Stat 17:571-582. */
export function replicatedVarying(plan: Plan, table: Table): Outcome {
  const { names, pairs } = linkedPairs(plan, table);
  const kept = names.map((name) => pairs.get(name)!.length > 0);
  const groups = names.flatMap((name, i) => (kept[i] ? [Float64Array.from(pairs.get(name)!)] : []));
  requireSubjects(groups.length, 2);
  if (groups.every((group) => group.length === 1)) throw new AnalysisError('too_few_replicates');
  const { mean: bias, msBetween, msWithin, effectiveSize, observations } = oneWayBySubject(groups);
  const between = Math.max(0, (msBetween - msWithin) / effectiveSize);
  return {
    n: groups.length,
    dropped: incomplete(names, kept),
    estimates: {
      ...agreementLimits(bias, Math.sqrt(between + msWithin), plan.limit_multiplier),
      ms_between: msBetween,
      ms_within: msWithin,
      between_subject_variance: between,
      within_subject_variance: msWithin,
      n_observations: observations,
    },
  };
}

interface UsedRows {
  /** Subjects with a used row, in order of the first one. */
  names: string[];
  subjects: string[];
  values: Float64Array;
  /** Position of the row's condition among the two levels, −1 for a row that is not used. */
  cellOf: number[];
  replicates: string[] | null;
}

function usedRows(plan: Plan, table: Table, replicateColumn?: string): UsedRows {
  const { subject, condition, levels } = required(plan, 'subject', 'condition', 'levels');
  const values = outcomeValues(plan, table);
  const subjects = table.keys(subject);
  const conditions = table.keys(condition);
  const replicates = replicateColumn === undefined ? null : table.keys(replicateColumn);
  table.levels(condition, levels);
  const cellOf = conditions.map((level) => levels.indexOf(level));
  const names = [...new Set(subjects.filter((_, row) => cellOf[row]! >= 0))];
  return { names, subjects, values, cellOf, replicates };
}

/** Differences of the pairs of each subject that have both halves. Errors: duplicate_cell. */
function linkedPairs(plan: Plan, table: Table): { names: string[]; pairs: Map<string, number[]> } {
  const { names, subjects, values, cellOf, replicates } = usedRows(plan, table, plan.replicate);
  const halves = new Map(names.map((name) => [name, new Map<string, [number?, number?]>()]));
  subjects.forEach((name, row) => {
    const side = cellOf[row]!;
    if (side < 0) return;
    const ofSubject = halves.get(name)!;
    const pair = ofSubject.get(replicates![row]!) ?? [];
    if (pair[side] !== undefined) throw new AnalysisError('duplicate_cell');
    pair[side] = values[row]!;
    ofSubject.set(replicates![row]!, pair);
  });
  const differences = (name: string) =>
    [...halves.get(name)!.values()].map(([x = NaN, y = NaN]) => x - y).filter((d) => !Number.isNaN(d));
  return { names, pairs: new Map(names.map((name) => [name, differences(name)])) };
}

function incomplete(names: readonly string[], kept: readonly boolean[]): Dropped[] {
  return names.filter((_, i) => !kept[i]).map((subject) => ({ subject, reason: 'incomplete' }));
}

function pooledVariance(groups: readonly Float64Array[]): number {
  const squares = groups.reduce((sum, group) => sum + sumOfSquares(group), 0);
  return squares / groups.reduce((sum, group) => sum + group.length - 1, 0);
}

function meanInverseSize(groups: readonly Float64Array[]): number {
  return groups.reduce((sum, group) => sum + 1 / group.length, 0) / groups.length;
}
