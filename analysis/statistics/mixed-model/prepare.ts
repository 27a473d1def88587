import { AnalysisError, invalidPlan } from '../core/analysis-error.ts';
import { solveNormalEquations, unpack, type PlainFit } from './cross-products.ts';
import { subjectStatistics, type MixedModelRows, type SubjectStatistics } from './subject-statistics.ts';
import { weightedMoments } from './weighted-moments.ts';

/** Statistics of rows whose model can be fitted. */
export interface PreparedRows {
  readonly statistics: SubjectStatistics;
  /** X'X over all rows, row-major. */
  readonly crossProducts: Float64Array;
  /** Coefficients whose fit was subtracted from the outcome. */
  readonly subtracted: Float64Array;
  /** Least-squares coefficients of what is left of the outcome. */
  readonly coefficients: Float64Array;
}

/** A fit that leaves less than this part of the sum of squares is subtracted from the rows. */
const NEARLY_ALL = 1e-4;

/**
 * Reduces the rows and refuses those for which no estimate exists.
 *
 * Where the fixed part explains nearly all of the outcome, over all rows or within subjects, its fit is subtracted
 * from the rows first: the residuals would otherwise be small differences of large sums.
 *
 * Errors  invalid_plan for a rank-deficient fixed part; too_few_replicates when no subject has more rows than random
 *         effects; zero_variance when what is left within subjects is at most `negligible` in size
 */
export function prepareRows(rows: MixedModelRows, negligible: number): PreparedRows {
  const subtracted = new Float64Array(rows.columns.length);
  let { statistics, overall, within } = plainFits(rows);
  const { crossProducts } = overall;
  if (overall.rank < rows.columns.length || statistics.rows <= overall.rank) {
    throw invalidPlan(
      'The fixed part is rank-deficient: a column follows from others, or a combination of levels has no row. Leave out a term.',
    );
  }
  if (statistics.rows <= statistics.spanned) {
    throw new AnalysisError(
      'too_few_replicates',
      {},
      'No subject has more rows than random effects, so the residual variance cannot be told from theirs. Take out the random slope, or compare subjects with another method.',
    );
  }
  for (const which of ['overall', 'within'] as const) {
    const fit = which === 'overall' ? overall : within;
    if (!fit.nearlyAll) continue;
    fit.coefficients.forEach((value, c) => (subtracted[c]! += value));
    ({ statistics, overall, within } = plainFits({ ...rows, outcome: residuals(rows, subtracted) }));
  }
  const hasResidual = statistics.rows > statistics.spanned + within.rank;
  if (hasResidual && within.sumOfSquares <= negligible ** 2 * statistics.rows)
    throw new AnalysisError('zero_variance');
  return { statistics, crossProducts, subtracted, coefficients: overall.coefficients };
}

type ComparedFit = PlainFit & { nearlyAll: boolean; crossProducts: Float64Array };

/** Least squares over all rows, and within subjects (beside the random-effects columns). */
function plainFits(rows: MixedModelRows): {
  statistics: SubjectStatistics;
  overall: ComparedFit;
  within: ComparedFit;
} {
  const statistics = subjectStatistics(rows);
  const p = statistics.columns;
  const between = weightedMoments(statistics, 1, (_, weights) => weights.set([1, 0, 1]));
  const all = unpack(
    between.map((value, e) => value + statistics.within[e]!),
    p,
  );
  const squares = (column: number) => all.matrix[column * p + column]!;
  const compare = (cross: typeof all) => {
    const fit = solveNormalEquations(cross, squares);
    return { ...fit, crossProducts: cross.matrix, nearlyAll: fit.sumOfSquares < NEARLY_ALL * cross.corner };
  };
  return { statistics, overall: compare(all), within: compare(unpack(statistics.within, p)) };
}

function residuals(rows: MixedModelRows, coefficients: Float64Array): Float64Array {
  const left = Float64Array.from(rows.outcome);
  rows.columns.forEach((column, c) => {
    const coefficient = coefficients[c]!;
    if (coefficient !== 0)
      for (let row = 0; row < left.length; row += 1) left[row]! -= coefficient * column[row]!;
  });
  return left;
}
