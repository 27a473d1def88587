import { analyse } from '../statistics/analyse.ts';
import { toCsv } from './analysis-table.ts';
import type { Effect } from './effect.ts';
import type { StudyPlan } from './study-plan.ts';

/** Adjusts the p-values over the plan's outcomes, in their order; one outcome or `none` needs no adjustment. */
export function adjustPValues(plan: StudyPlan, effects: Effect[]): Effect[] {
  if (plan.multiplicity === 'none' || effects.length < 2) return effects;
  const { tables } = analyse(
    {
      method: 'multiplicity',
      outcome: 'p',
      ...(plan.multiplicity === 'fixed_sequence' ? { ordered: true } : {}),
    },
    toCsv(
      ['p'],
      effects.map(({ pValue }) => ({ p: pValue })),
    ),
  );
  return effects.map((effect, index) => {
    const adjusted = tables['adjusted']?.[index]?.[plan.multiplicity];
    return { ...effect, pAdjusted: typeof adjusted === 'number' ? adjusted : null };
  });
}
