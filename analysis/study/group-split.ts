import { sharesOfChange, type Shares } from '../haemodynamics/split/shares.ts';
import { studentTQuantile } from '../numerics/student-t.ts';
import { analyse } from '../statistics/analyse.ts';
import type { Result } from '../statistics/core/result.ts';
import { quantity } from '../units/quantity.ts';
import { toCsv } from './analysis-table.ts';
import type { Effect } from './effect.ts';
import type { ParticipantSplit } from './participant-splits.ts';
import type { StudyPlan } from './study-plan.ts';

/** The group's split: three log-changes that add up, and the shares where they mean something. */
export interface GroupSplit {
  total: Effect;
  rheological: Effect;
  geometric: Effect;
  shares: Shares;
  /** Share with Fieller's and the bootstrap's interval; null where shares are not shown. */
  share: Result | null;
}

/** Shares are shown only under the rule of the haemodynamics reference 6.3, otherwise its words. */
export function groupSplit(
  plan: StudyPlan,
  effects: { total: Effect; rheological: Effect; geometric: Effect },
  splits: readonly ParticipantSplit[],
): GroupSplit {
  const { total, rheological, geometric } = effects;
  // cov(A,B) from var(G) = var(A) + var(B) − 2 cov(A,B), all three from the same participants.
  const covariance =
    (total.standardError ** 2 + rheological.standardError ** 2 - geometric.standardError ** 2) / 2;
  const tQuantile = studentTQuantile(1 - (1 - plan.confidence) / 2, total.df);
  const shares = sharesOfChange(
    {
      total: quantity(total.logEstimate),
      rheological: quantity(rheological.logEstimate),
      geometric: quantity(geometric.logEstimate),
    },
    {
      standardErrorTotal: total.standardError,
      standardErrorRheological: rheological.standardError,
      covariance: clamped(covariance, total.standardError * rheological.standardError),
      tQuantile,
    },
  );
  return { ...effects, shares, share: shares.shown ? groupShare(plan, splits) : null };
}

/** Rounding may put a covariance a hair outside what its variances allow. */
const clamped = (value: number, bound: number): number => Math.min(bound, Math.max(-bound, value));

function groupShare(plan: StudyPlan, splits: readonly ParticipantSplit[]): Result {
  return analyse(
    {
      method: 'group_share',
      subject: 'participant',
      outcome: 'total',
      covariates: ['rheological'],
      confidence: plan.confidence,
      seed: plan.seed,
    },
    toCsv(
      ['participant', 'total', 'rheological'],
      splits.map(({ participant, total, rheological }) => ({ participant, total, rheological })),
    ),
  );
}
