import { equivalenceBounds, equivalenceTest } from '../core/equivalence.ts';
import type { Method } from '../core/method.ts';
import { mean, standardDeviation } from '../core/moments.ts';
import { varyingPairsOf } from '../core/paired-difference.ts';
import type { Plan } from '../core/plan.ts';

const boundsOf = (plan: Plan) => equivalenceBounds(plan, { ratios: plan.transform === 'log' });

/** Two one-sided paired t tests against bounds of equivalence; Schuirmann 1987, J Pharmacokinet Biopharm 15:657-680. */
export const equivalencePaired: Method = {
  name: 'equivalence_paired',
  check: boundsOf,
  run(plan, table) {
    const { n, difference, dropped } = varyingPairsOf(plan, table);
    const mean_difference = mean(difference);
    const sd_difference = standardDeviation(difference);
    const standard_error = sd_difference / Math.sqrt(n);
    const test = equivalenceTest(mean_difference, standard_error, n - 1, boundsOf(plan)!, plan.confidence);
    return {
      n,
      dropped,
      estimates: {
        mean_difference,
        sd_difference,
        standard_error,
        df: n - 1,
        ...test,
        ...(plan.transform === 'log' && {
          ratio: Math.exp(mean_difference),
          ratio_ci_lower: Math.exp(test.ci_lower),
          ratio_ci_upper: Math.exp(test.ci_upper),
        }),
      },
    };
  },
};
