import { findRoot } from '../../numerics/find-root.ts';
import { AnalysisError, invalidPlan } from '../core/analysis-error.ts';
import type { Method } from '../core/method.ts';
import type { Plan } from '../core/plan.ts';
import { tTestPower } from '../core/t-power.ts';

const mostSubjects = 1e7;

/** Power, number of subjects or detectable effect of a paired t test, from the other two. */
export const powerPairedT: Method = {
  name: 'power_paired_t',
  check: checkQuantities,
  run(plan) {
    const { n, power, alpha } = plan;
    const effect = effectSize(plan);
    if (effect === undefined) return detectableEffect(plan, n!, power!);
    if (power === undefined) {
      const estimates = { effect_size: effect, n: n!, alpha, power: powerOf(plan, effect, n!) };
      return { n: n!, estimates: { ...estimates, df: n! - 1, noncentrality: effect * Math.sqrt(n!) } };
    }
    return neededSubjects(plan, effect, power);
  },
};

function effectSize(plan: Plan): number | undefined {
  if (plan.effect_size !== undefined) return plan.effect_size;
  return plan.mean_difference === undefined ? undefined : plan.mean_difference / plan.sd_difference!;
}

function checkQuantities(plan: Plan): void {
  if (plan.mean_difference !== undefined) {
    if (plan.sd_difference === undefined)
      throw invalidPlan('"mean_difference" needs "sd_difference" beside it.');
    if (plan.effect_size !== undefined)
      throw invalidPlan('Give "effect_size" or "mean_difference", not both.');
  }
  const given = [effectSize(plan), plan.n, plan.power].filter((value) => value !== undefined).length;
  if (given !== 2) throw invalidPlan('Give two of the effect, "n" and "power".');
}

function powerOf({ alpha, direction }: Plan, effect: number, n: number): number {
  return tTestPower(effect * Math.sqrt(n), n - 1, alpha, direction);
}

function neededSubjects(plan: Plan, effect: number, power: number): ReturnType<Method['run']> {
  const gap = (n: number) => powerOf(plan, effect, n) - power;
  if (gap(2) > 0) throw unsolvable('Two subjects already have more power than the plan asks for.');
  let high = 4;
  while (gap(high) < 0) {
    high *= 2;
    if (high > mostSubjects) throw unsolvable('No number of subjects gives this power for this effect.');
  }
  const n = findRoot(gap, Math.max(2, high / 2), high);
  const n_required = Math.ceil(n - 1e-9);
  const power_at_n_required = powerOf(plan, effect, n_required);
  return {
    n: n_required,
    estimates: { effect_size: effect, n, n_required, alpha: plan.alpha, power, power_at_n_required },
  };
}

function detectableEffect(plan: Plan, n: number, power: number): ReturnType<Method['run']> {
  const sign = plan.direction === 'below' ? -1 : 1;
  const gap = (size: number) => powerOf(plan, sign * size, n) - power;
  if (power <= plan.alpha) throw unsolvable('The power has to be above the significance level.');
  let high = 1;
  while (gap(high) < 0) {
    high *= 2;
    if (high > 1e12) throw unsolvable('No effect gives this power with so few subjects.');
  }
  const effect = sign * findRoot(gap, high === 1 ? 0 : high / 2, high);
  const { sd_difference } = plan;
  return {
    n,
    estimates: {
      effect_size: effect,
      n,
      alpha: plan.alpha,
      power,
      noncentrality: effect * Math.sqrt(n),
      ...(sd_difference !== undefined && { mean_difference: effect * sd_difference }),
    },
  };
}

function unsolvable(detail: string): AnalysisError {
  return new AnalysisError('out_of_range', {}, detail);
}
