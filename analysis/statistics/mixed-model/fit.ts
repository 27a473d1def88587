import { AnalysisError, invalidPlan } from '../core/analysis-error.ts';
import { mean } from '../core/moments.ts';
import type { LikelihoodParts } from './likelihood.ts';
import { minimise, type Evaluation } from './optimise.ts';
import { prepareRows, type PreparedRows } from './prepare.ts';
import {
  profiledDeviance,
  residualDegrees,
  type FreeElements,
  type ProfilePoint,
} from './profiled-deviance.ts';
import { leftAtBoundary, randomEffects, type FreeFactor, type RandomEffects } from './random-effects.ts';
import type { RelativeFactor } from './relative-covariance.ts';
import { startingPoints } from './starting-points.ts';
import type { SlopeCovariate, SubjectStatistics } from './subject-statistics.ts';

/** A linear mixed model of repeated rows of subjects: a random intercept, and a random slope if there is one. */
export interface MixedModel {
  /** Natural scale; shift it near zero. */
  readonly outcome: Float64Array;
  /** Columns of the fixed part, of order one. */
  readonly columns: readonly Float64Array[];
  /** 0 … subjectCount − 1 for each row; each subject has a row. */
  readonly subjects: Int32Array;
  readonly subjectCount: number;
  readonly slope?: Float64Array | undefined;
  /** Whether intercept and slope are correlated. */
  readonly correlated?: boolean | undefined;
  readonly estimation?: 'REML' | 'ML' | undefined;
  /** Size of residuals that are only rounding. */
  readonly negligible: number;
  /** Sum of the logarithms of the units in which columns are given: the likelihood is that of the columns themselves. */
  readonly logColumnUnits?: number | undefined;
}

/** A fitted model, with what the inference about its fixed part needs. */
export interface MixedModelFit {
  readonly coefficients: Float64Array;
  readonly residualVariance: number;
  readonly randomEffects: RandomEffects;
  /** A variance was estimated as zero, or the correlation as ±1. */
  readonly atBoundary: boolean;
  readonly logLikelihood: number;
  /** Fixed coefficients and variance parameters, the residual variance among them. */
  readonly parameterCount: number;
  readonly reml: boolean;
  readonly statistics: SubjectStatistics;
  /** X'X over all rows, row-major. */
  readonly crossProducts: Float64Array;
  /** Elements of Λ in the model (not only those away from the boundary). */
  readonly elements: FreeElements;
  readonly free: FreeElements;
  readonly factor: RelativeFactor;
  readonly parts: LikelihoodParts;
}

/**
 * Fits a linear mixed model by (restricted) maximum likelihood.
 *
 * The deviance is profiled over coefficients and residual variance and minimised by Newton steps over the
 * Cholesky factor of the relative covariance of the random effects, from several starts. A correlated slope is
 * fitted about the mean of its covariate, which changes no result and makes the two effects comparable in size.
 *
 * Errors  those of `prepareRows`; invalid_plan for a slope that does not vary; no_convergence
 * Source  Laird and Ware 1982, Biometrics 38:963-974; Bates et al. 2015, J Stat Softw 67(1)
 */
export function fitMixedModel(model: MixedModel): MixedModelFit {
  const elements = elementsOf(model);
  const meanOfSlope = model.slope === undefined ? 0 : mean(model.slope);
  let left: FreeFactor = { free: elements, origin: elements.includes(1) ? meanOfSlope : 0 };
  let slope = slopeAbout(model.slope, left.origin);
  let prepared = prepareRows({ ...model, slope }, model.negligible);
  if (prepared.statistics.rows - prepared.statistics.columns <= elements.length) {
    throw noConvergence('Fewer rows are left beside the fixed part than there are variances to estimate.');
  }
  for (let atBoundary = false; ; atBoundary = true) {
    const { free } = left;
    const optimum = search(prepared, { reml: model.estimation !== 'ML', free });
    const next = leftAtBoundary(optimum.factor, slope, left);
    if (next === null) return describe(model, slope, { ...prepared, ...optimum, elements, free, atBoundary });
    if (next.origin !== left.origin) {
      slope = slopeAbout(model.slope, next.origin);
      prepared = prepareRows({ ...model, slope }, model.negligible);
    }
    left = next;
  }
}

function search(
  { statistics, coefficients }: PreparedRows,
  options: { reml: boolean; free: FreeElements },
): ProfilePoint {
  const objective = profiledDeviance(statistics, options);
  let optimum: Evaluation<ProfilePoint> | null = null;
  for (const start of startingPoints(statistics, options.free, coefficients)) {
    const found = minimise(objective, start);
    if (found !== null && !(optimum !== null && optimum.value <= found.value)) optimum = found;
  }
  if (optimum !== null) return optimum.detail;
  throw noConvergence('The mixed model has no best set of variances.');
}

function noConvergence(reason: string): AnalysisError {
  return new AnalysisError('no_convergence', {}, `${reason} Simplify the model.`);
}

function describe(
  model: MixedModel,
  slope: SlopeCovariate | null,
  fit: PreparedRows & ProfilePoint & Pick<MixedModelFit, 'elements' | 'free' | 'atBoundary'>,
): MixedModelFit {
  const { statistics, factor, parts, elements, free, atBoundary } = fit;
  const reml = model.estimation !== 'ML';
  const degrees = residualDegrees(statistics, reml);
  const residualVariance = parts.residual.value / degrees;
  const deviance =
    degrees * (Math.log(2 * Math.PI * residualVariance) + 1) +
    parts.logDeterminants.value +
    (reml ? 2 * (model.logColumnUnits ?? 0) : 0);
  return {
    coefficients: parts.coefficients.map((value, c) => value + fit.subtracted[c]!),
    residualVariance,
    randomEffects: randomEffects(factor, slope, { residualVariance, correlated: elements.includes(1) }),
    atBoundary,
    logLikelihood: -0.5 * deviance,
    parameterCount: statistics.columns + elements.length + 1,
    ...{ reml, statistics, crossProducts: fit.crossProducts, elements, free, factor, parts },
  };
}

function elementsOf({ slope, correlated }: MixedModel): FreeElements {
  if (slope === undefined) return [0];
  return correlated === false ? [0, 2] : [0, 1, 2];
}

/** The covariate of the slope about an origin, in units of its root mean square there. */
function slopeAbout(values: Float64Array | undefined, origin: number): SlopeCovariate | null {
  if (values === undefined) return null;
  let squares = 0;
  for (const value of values) squares += (value - origin) ** 2;
  const unit = Math.sqrt(squares / values.length);
  if (values.every((value) => value === values[0])) {
    throw invalidPlan('The column of the random slope does not vary. Take it out.');
  }
  return { values, origin, unit };
}
