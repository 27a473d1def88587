import { smallestDetectableChange } from '../readings/smallest-detectable-change.ts';
import { analysisRow } from './analysis-table.ts';
import type { PeriodChange } from './changes.ts';
import type { StudyPlan } from './study-plan.ts';

/** The split of one participant: natural log-changes, condition x less condition y in a crossover. */
export interface ParticipantSplit {
  participant: string;
  /** Condition or order, for grouping. */
  group: string;
  total: number;
  rheological: number | null;
  geometric: number | null;
}

/** One split a participant; parts are null where the plan has no viscosity. */
export function participantSplits(plan: StudyPlan, changes: readonly PeriodChange[]): ParticipantSplit[] {
  const byParticipant = new Map<string, PeriodChange[]>();
  for (const change of changes) {
    byParticipant.set(change.participant, [...(byParticipant.get(change.participant) ?? []), change]);
  }
  return [...byParticipant].flatMap(([participant, periods]) => {
    const parts = periods.map((period) => {
      const row = analysisRow(period);
      return {
        condition: period.condition,
        total: row.log_change_resistance as number,
        rheological: row.log_change_viscosity as number | null,
        geometric: row.log_change_hindrance as number | null,
      };
    });
    if (plan.design !== 'crossover-2x2') {
      const [only] = parts;
      return only ? [{ participant, group: only.condition, ...without(only) }] : [];
    }
    const x = parts.find(({ condition }) => condition === plan.conditions?.[0]);
    const y = parts.find(({ condition }) => condition === plan.conditions?.[1]);
    if (!x || !y) return [];
    const first = periods.find(({ period }) => period === 1)?.condition ?? '';
    const difference = (a: number | null, b: number | null): number | null =>
      a === null || b === null ? null : a - b;
    return [
      {
        participant,
        group: first,
        total: x.total - y.total,
        rheological: difference(x.rheological, y.rheological),
        geometric: difference(x.geometric, y.geometric),
      },
    ];
  });
}

const without = ({ total, rheological, geometric }: Omit<ParticipantSplit, 'participant' | 'group'>) => ({
  total,
  rheological,
  geometric,
});

/**
 * Smallest change of tone that can be told from noise in one person, on the log scale.
 *
 * The noise comes from this study's own control periods (condition y), where nothing was done to the tone:
 * their changes of ln hindrance scatter about their mean with √2 times the within-person deviation.
 * Null with fewer than three control periods, or without a split.
 */
export function detectableChange(plan: StudyPlan, changes: readonly PeriodChange[]): number | null {
  if (plan.design !== 'crossover-2x2' || plan.viscosity === null) return null;
  const control = changes
    .filter(({ condition }) => condition === plan.conditions?.[1])
    .map((change) => analysisRow(change).log_change_hindrance as number);
  if (control.length < 3) return null;
  const mean = control.reduce((sum, value) => sum + value, 0) / control.length;
  const variance = control.reduce((sum, value) => sum + (value - mean) ** 2, 0) / (control.length - 1);
  // A participant’s split is the difference of two such changes, one a period.
  return smallestDetectableChange(Math.sqrt(variance), 1.96);
}
