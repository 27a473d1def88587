import type { Plan } from './plan.ts';

/** Every column of the data that a plan names, in the order in which they are looked for. */
export function columnsOf(plan: Plan): string[] {
  if (plan.method === 'multiplicity') return named(plan.outcome, plan.families);
  return [
    ...named(
      plan.subject,
      plan.outcome,
      plan.condition,
      plan.period,
      plan.sequence,
      plan.dose,
      plan.replicate,
      plan.baseline,
      plan.families,
    ),
    ...(plan.covariates ?? []),
    ...(plan.within ?? []),
    ...(plan.between ?? []),
    ...(plan.fixed ?? []).flat(),
    ...(plan.random?.slopes ?? []),
    ...(plan.factors ?? []),
    ...named(plan.marginal_means?.factor, plan.marginal_means?.by),
  ];
}

function named(...columns: (string | undefined)[]): string[] {
  return columns.filter((column) => column !== undefined);
}
