import { AnalysisError, invalidPlan } from '../core/analysis-error.ts';
import { equivalenceBounds, type EquivalenceBounds } from '../core/equivalence.ts';
import { equivalencePower } from '../core/equivalence-power.ts';
import type { Method } from '../core/method.ts';
import type { Plan } from '../core/plan.ts';
import { tTestPower } from '../core/t-power.ts';

const mostSubjects = 1e7;

/** Power or number of subjects of a 2 × 2 cross-over with equal sequences, for a difference or for equivalence. */
export const powerCrossover: Method = {
  name: 'power_crossover',
  check: (plan) => void settingOf(plan),
  run(plan) {
    const { power, alpha } = plan;
    const setting = settingOf(plan);
    const { within_subject_sd, difference } = setting;
    const describe = (n: number) => ({
      alpha,
      within_subject_sd,
      difference,
      standard_error: standardError(setting, n),
      df: n - 2,
    });
    if (power === undefined) {
      const n = plan.n!;
      return { n, estimates: { n, ...describe(n), power: powerOf(plan, setting, n) } };
    }
    const n = smallestEvenN((subjects) => powerOf(plan, setting, subjects) >= power);
    const required = { n_required: n, n_per_sequence: n / 2 };
    return {
      n,
      estimates: { ...required, ...describe(n), power, power_at_n_required: powerOf(plan, setting, n) },
    };
  },
};

interface Setting {
  within_subject_sd: number;
  difference: number;
  /** Null when a difference is to be shown. */
  bounds: EquivalenceBounds | null;
}

/** Errors: invalid_plan for quantities that are missing, doubled or of two scales. */
function settingOf(plan: Plan): Setting {
  const { n, power, ratio, cv, difference, within_subject_sd: sd, objective } = plan;
  if ((n === undefined) === (power === undefined)) throw invalidPlan('Give "n" or "power", not both.');
  if (n !== undefined && n <= 2) throw invalidPlan('"n" has to be above 2.');
  const onRatios = ratio !== undefined && cv !== undefined && difference === undefined && sd === undefined;
  const onDifferences =
    difference !== undefined && sd !== undefined && ratio === undefined && cv === undefined;
  if (!onRatios && !onDifferences) {
    throw invalidPlan('Give "difference" and "within_subject_sd", or "ratio" and "cv".');
  }
  const bounds = objective === 'equivalence' ? boundsOf(plan, onRatios) : null;
  return onRatios
    ? { within_subject_sd: Math.sqrt(Math.log1p(cv ** 2)), difference: Math.log(ratio), bounds }
    : { within_subject_sd: sd!, difference: difference!, bounds };
}

/** The tests run at `alpha`, so it takes the place of 1 − confidence in the check of the bounds. */
function boundsOf(plan: Plan, ratios: boolean): EquivalenceBounds {
  const bounds = equivalenceBounds({ ...plan, confidence: 1 - plan.alpha }, { ratios });
  if (bounds === null) throw invalidPlan('Equivalence needs "equivalence_lower" and "equivalence_upper".');
  return bounds;
}

function standardError({ within_subject_sd }: Setting, n: number): number {
  return within_subject_sd * Math.sqrt(2 / n);
}

function powerOf({ alpha, direction }: Plan, setting: Setting, n: number): number {
  const se = standardError(setting, n);
  const { difference, bounds } = setting;
  return bounds === null
    ? tTestPower(difference / se, n - 2, alpha, direction)
    : equivalencePower(difference, se, n - 2, bounds, alpha);
}

/** Power grows with n, so the first sufficient n is found by doubling and halving. */
function smallestEvenN(suffices: (n: number) => boolean): number {
  let high = 4;
  while (!suffices(high)) {
    high *= 2;
    if (high > mostSubjects) {
      throw new AnalysisError(
        'out_of_range',
        {},
        'No number of subjects gives this power for this difference.',
      );
    }
  }
  let low = high / 2;
  while (high - low > 2) {
    const middle = 2 * Math.round((low + high) / 4);
    if (suffices(middle)) high = middle;
    else low = middle;
  }
  return high;
}
