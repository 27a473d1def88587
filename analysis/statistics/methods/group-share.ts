import { seededRandom } from '../../numerics/random.ts';
import { studentTQuantile } from '../../numerics/student-t.ts';
import { AnalysisError } from '../core/analysis-error.ts';
import { bootstrapLimits, quantileOfResamples, type BootstrapLimits } from '../core/bootstrap.ts';
import { requireSubjects } from '../core/cells.ts';
import { isConstantOnGrid, roundingGrid } from '../core/grid.ts';
import type { Method } from '../core/method.ts';
import { correlation, mean, standardDeviation, sumOfProducts } from '../core/moments.ts';
import { required, type Plan } from '../core/plan.ts';
import { warning, type Dropped } from '../core/result.ts';
import type { Table } from '../core/table.ts';

/** Share of one mean log-change in another: Fieller's interval and a bootstrap of subjects. */
export const groupShare: Method = {
  name: 'group_share',
  run(plan, table) {
    const { a, b, dropped } = changesOf(plan, table);
    const n = a.length;
    const meanA = mean(a);
    const meanB = mean(b);
    const sdB = standardDeviation(b);
    const t = -studentTQuantile((1 - plan.confidence) / 2, n - 1);
    const hasShare = Math.abs(meanB) > roundingGrid(b);
    const fiellerG = hasShare ? (t * sdB) ** 2 / (n * meanB ** 2) : null;
    const bounded = fiellerG !== null && fiellerG < 1;
    const interval = bounded ? fiellerInterval(a, b, t) : { lower: null, upper: null };
    return {
      n,
      dropped,
      estimates: {
        mean_a: meanA,
        mean_b: meanB,
        sd_a: standardDeviation(a),
        sd_b: sdB,
        cov_ab: sumOfProducts(a, b) / (n - 1),
        correlation: correlation(a, b),
        share: hasShare ? meanA / meanB : null,
        df: n - 1,
        fieller_g: fiellerG,
        share_ci_lower: interval.lower,
        share_ci_upper: interval.upper,
        ...(bounded ? resampledLimits(a, b, plan) : noLimits),
      },
      warnings: bounded ? [] : [warning('share_not_estimable')],
    };
  },
};

const noLimits = {
  percentile_ci_lower: null,
  percentile_ci_upper: null,
  bca_ci_lower: null,
  bca_ci_upper: null,
  bca_z0: null,
  bca_acceleration: null,
};

function changesOf(plan: Plan, table: Table): { a: Float64Array; b: Float64Array; dropped: Dropped[] } {
  const { outcome, subject, covariates } = required(plan, 'outcome', 'subject', 'covariates');
  const allB = table.numbers(outcome);
  const allA = table.numbers(covariates[0]!);
  const subjects = table.keys(subject);
  if (new Set(subjects).size < subjects.length) throw new AnalysisError('duplicate_cell');
  const complete = subjects.map((_, i) => !Number.isNaN(allA[i]!) && !Number.isNaN(allB[i]!));
  const a = allA.filter((_, i) => complete[i]);
  const b = allB.filter((_, i) => complete[i]);
  requireSubjects(a.length, 3);
  if (isConstantOnGrid(a, roundingGrid(a)) || isConstantOnGrid(b, roundingGrid(b))) {
    throw new AnalysisError('zero_variance');
  }
  return {
    a,
    b,
    dropped: subjects.filter((_, i) => !complete[i]).map((name) => ({ subject: name, reason: 'incomplete' })),
  };
}

/** Roots ρ of n(ā − ρb̄)² = t²(s_a² − 2ρs_ab + ρ²s_b²); Fieller 1954, JRSS B 16:175-185. */
function fiellerInterval(a: Float64Array, b: Float64Array, t: number): { lower: number; upper: number } {
  const n = a.length;
  const scale = t ** 2 / (n * (n - 1));
  const quadratic = mean(b) ** 2 - scale * sumOfProducts(b, b);
  const middle = mean(a) * mean(b) - scale * sumOfProducts(a, b);
  const constant = mean(a) ** 2 - scale * sumOfProducts(a, a);
  const root = Math.sqrt(Math.max(0, middle ** 2 - quadratic * constant));
  return { lower: (middle - root) / quadratic, upper: (middle + root) / quadratic };
}

function resampledLimits(a: Float64Array, b: Float64Array, plan: Plan): BootstrapLimits {
  const random = seededRandom(plan.seed);
  const n = a.length;
  const share = mean(a) / mean(b);
  const rounding = 1e-13 * Math.abs(share);
  const shares = new Float64Array(plan.resamples);
  let below = 0;
  for (let r = 0; r < shares.length; r += 1) {
    let sumA = 0;
    let sumB = 0;
    for (let i = 0; i < n; i += 1) {
      const subject = random.below(n);
      sumA += a[subject]!;
      sumB += b[subject]!;
    }
    shares[r] = sumA / sumB;
    if (shares[r]! < share - rounding) below += 1;
  }
  const leaveOneOut = a.map((value, i) => (n * mean(a) - value) / (n * mean(b) - b[i]!));
  return bootstrapLimits(
    { shareBelow: below / shares.length, quantile: quantileOfResamples(shares.sort()), leaveOneOut },
    plan.confidence,
  );
}
