import { fiellerInterval } from './fieller-interval.ts';
import type { FiellerInterval } from './fieller-interval.ts';
import type { SplitParts } from './split-of-change.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireNotNegative, requirePositive } from '../../units/require.ts';

/** How well the parts are known. Without it they are taken as exact. */
export interface SplitUncertainty {
  readonly standardErrorTotal: number;
  readonly standardErrorRheological: number;
  /** Covariance of A and B: 0 within a subject, where haematocrit and flow are measured apart. */
  readonly covariance?: number;
  /** Quantile of t for the df of the total's standard error. */
  readonly tQuantile: number;
}

export const sharesNotMeaningful = 'opposing or negligible change: shares not meaningful';

export const refusalReasons = {
  'total-not-clear': 'the change of resistance is not clearly different from none',
  'negligible-change': 'the change of resistance is below 5 %',
  'rheological-opposes': 'viscosity moved against the resistance',
  'geometric-opposes': 'the hindrance moved against the resistance',
} as const;

export type Shares =
  | {
      readonly shown: true;
      readonly rheological: Quantity<'1'>;
      readonly vasomotor: Quantity<'1'>;
      /** Fieller's interval of the rheological share; absent without uncertainty. */
      readonly interval?: FiellerInterval;
    }
  | { readonly shown: false; readonly reason: keyof typeof refusalReasons; readonly message: string };

/**
 * Shares of a change of resistance, or the words that say why there are none. Never clipped, never averaged over subjects.
 *
 * Formula  s = A/B and 1 − s, shown only if |B| > t SE(B), |B| > ln 1.05, and neither A's nor G's whole interval opposes B
 * Units    1
 * Shape    scalars
 * Domain   SEs ≥ 0, t > 0
 * Errors   DomainError naming the argument; never NaN
 * Assumes  the sign of a noisy part near zero refuses nothing; its whole interval must lie on the other side
 * Source   haemodynamics reference 6.3 and bench practice 4; reference cases hd-093, hd-094
 */
export function sharesOfChange(parts: SplitParts, uncertainty?: SplitUncertainty): Shares {
  const { total, rheological, geometric } = parts;
  const errors = standardErrors(uncertainty);
  if (Math.abs(total) <= errors.total) return refusal('total-not-clear');
  if (Math.abs(total) <= Math.log(1.05)) return refusal('negligible-change');
  if (opposes(rheological, errors.rheological, total)) return refusal('rheological-opposes');
  if (opposes(geometric, errors.geometric, total)) return refusal('geometric-opposes');
  const share = rheological / total;
  return {
    shown: true,
    rheological: quantity(share),
    vasomotor: quantity(geometric / total),
    ...(uncertainty && {
      interval: fiellerInterval(
        rheological,
        total,
        {
          numerator: uncertainty.standardErrorRheological ** 2,
          denominator: uncertainty.standardErrorTotal ** 2,
          covariance: uncertainty.covariance ?? 0,
        },
        uncertainty.tQuantile,
      ),
    }),
  };
}

/** Half widths of the three parts' intervals; 0 where nothing is known, so that each part is its own interval. */
function standardErrors(uncertainty: SplitUncertainty | undefined) {
  if (!uncertainty) return { total: 0, rheological: 0, geometric: 0 };
  const { standardErrorTotal, standardErrorRheological, covariance = 0, tQuantile } = uncertainty;
  requireNotNegative('standardErrorTotal', standardErrorTotal);
  requireNotNegative('standardErrorRheological', standardErrorRheological);
  requirePositive('tQuantile', tQuantile);
  const variance = standardErrorTotal ** 2 + standardErrorRheological ** 2 - 2 * covariance;
  return {
    total: tQuantile * standardErrorTotal,
    rheological: tQuantile * standardErrorRheological,
    geometric: tQuantile * Math.sqrt(Math.max(0, variance)),
  };
}

function opposes(part: number, halfWidth: number, total: number): boolean {
  return total > 0 ? part + halfWidth < 0 : part - halfWidth > 0;
}

function refusal(reason: keyof typeof refusalReasons): Shares {
  return { shown: false, reason, message: `${sharesNotMeaningful} (${refusalReasons[reason]})` };
}
