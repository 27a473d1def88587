import { randomInt } from 'node:crypto';
import type { CutMeasure } from './cut-file.ts';

interface MeasuredAt {
  site: string;
  unblinding: boolean;
  measure: CutMeasure;
}

/**
 * Makes measures fit for rehearsing a plan before unblinding: each participant's condition labels are flipped
 * or not by chance, and values that would tell the arm are permuted among the participants of a site.
 * The chance is not kept: nobody can turn it back.
 */
export function rehearse(measures: readonly MeasuredAt[]): CutMeasure[] {
  const conditions = [...new Set(measures.flatMap(({ measure }) => measure.condition ?? []))].sort();
  const flips = new Map<string, boolean>();
  const permuted = permuteUnblinding(measures);
  return measures.map(({ measure }, index) => {
    const { participant, condition } = measure;
    if (!flips.has(participant)) flips.set(participant, randomInt(2) === 1);
    const flipped =
      condition !== null && conditions.length === 2 && flips.get(participant)
        ? (conditions.find((other) => other !== condition) ?? condition)
        : condition;
    return { ...measure, condition: flipped, ...permuted[index] };
  });
}

/** For each place a measure's value is read from, by chance within site, quantity, time and period. */
function permuteUnblinding(measures: readonly MeasuredAt[]): Partial<CutMeasure>[] {
  const groups = new Map<string, number[]>();
  measures.forEach(({ site, unblinding, measure }, index) => {
    if (!unblinding) return;
    const key = [site, measure.quantity, measure.timePoint, measure.period].join(' ');
    groups.set(key, [...(groups.get(key) ?? []), index]);
  });
  const result: Partial<CutMeasure>[] = measures.map(() => ({}));
  for (const indexes of groups.values()) {
    const sources = shuffled(indexes);
    indexes.forEach((index, at) => {
      const source = measures[sources[at]!]!.measure;
      result[index] = { value: source.value, reason: source.reason };
    });
  }
  return result;
}

/** Fisher and Yates, with a cryptographic generator. */
function shuffled<T>(items: readonly T[]): T[] {
  const result = [...items];
  for (let last = result.length - 1; last > 0; last -= 1) {
    const other = randomInt(last + 1);
    [result[last], result[other]] = [result[other]!, result[last]!];
  }
  return result;
}
