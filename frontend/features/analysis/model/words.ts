import type { Effect } from '#analysis/study/effect.ts';
import type { OutcomeKey } from '#analysis/study/study-plan.ts';
import type { RunDto } from '#schemas/api/analysis.ts';
import { formatNumber } from '../../../lib/format/numbers.ts';

export const outcomeNames: Record<OutcomeKey, string> = {
  resistance: 'forearm vascular resistance',
  conductance: 'vascular conductance',
  viscosity: 'blood viscosity (viscosity part)',
  hindrance: 'vascular hindrance (tone part)',
};

export const standingWords: Record<RunDto['standing'], string> = {
  planned: 'plan signed while the study was running, before lock and unblinding',
  'post-hoc': 'POST HOC: the plan was signed after the lock',
  rehearsal: 'REHEARSAL: labels flipped by chance, unblinding values permuted. No number here is a finding.',
};

/** "0.748" */
export const ratio = (value: number): string => formatNumber(value, { decimals: 3 });

/** "0.700 to 0.800" */
export const ratioInterval = ({
  ratioLower,
  ratioUpper,
}: Pick<Effect, 'ratioLower' | 'ratioUpper'>): string => `${ratio(ratioLower)} to ${ratio(ratioUpper)}`;

/** A log-change as a change in per cent: −0.288 → −25. */
export const percentOf = (logChange: number): number => 100 * Math.expm1(logChange);

export const percentWords = (logChange: number): string => {
  const value = percentOf(logChange);
  return `${value > 0 ? '+' : ''}${formatNumber(value, { decimals: Math.abs(value) < 9.95 ? 1 : 0 })} %`;
};
