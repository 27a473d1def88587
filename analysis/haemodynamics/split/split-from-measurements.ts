import { cautions } from '../../cautions/cautions.ts';
import type { Caution } from '../../cautions/cautions.ts';
import { effectiveDegreesOfFreedom } from './measurement.ts';
import type { Measurement } from './measurement.ts';
import { sharesOfChange } from './shares.ts';
import type { Shares } from './shares.ts';
import { splitOfChange } from './split-of-change.ts';
import { defaultSensitivityLaws, viscosityLawNamed } from '../../haemorheology/viscosity-laws.ts';
import type { LawOptions, ViscosityLaw } from '../../haemorheology/viscosity-law.ts';
import { temperatureCorrectedViscosity } from '../../haemorheology/viscosity/temperature-corrected-viscosity.ts';
import { DomainError } from '../../units/errors.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireNotNegative } from '../../units/require.ts';

/** One condition of one person, each value with its own uncertainty. */
export interface SplitCondition {
  readonly meanPressure: Measurement;
  readonly flow: Measurement;
  /** Fraction of 1. */
  readonly haematocrit: Measurement;
  /** mPa.s at the temperature at which it was measured, or the assumed constant of the plan. */
  readonly plasmaViscosity: Measurement & { readonly temperature: Quantity<'Cel'> | undefined };
}

export interface LawChoice {
  readonly law: string;
  readonly options?: LawOptions;
}

interface SplitEstimate {
  readonly estimate: number;
  readonly standardError: number;
  readonly df: number;
  readonly lower: number;
  readonly upper: number;
}

export interface SplitResult {
  readonly law: { readonly id: string; readonly version: number; readonly options: LawOptions };
  readonly total: SplitEstimate;
  readonly rheological: SplitEstimate;
  readonly geometric: SplitEstimate;
  readonly shares: Shares;
  readonly equivalentRadiusChangePercent: number;
  readonly viscosities: readonly [Quantity<'mPa.s'>, Quantity<'mPa.s'>];
  readonly cautions: readonly Caution[];
}

export interface SplitOptions {
  /** Quantile of Student's t for an upper probability and degrees of freedom (infinite for the normal). */
  readonly tQuantile: (probability: number, df: number) => number;
  readonly confidence?: number;
  /** Extra variance of ln(η₂/η₁) for the law itself. */
  readonly modelVariance?: number;
}

/**
 * Splits the change between two conditions of one person, with uncertainty propagated from replicate readings.
 *
 * Formula  B = ln(P₂Q₁/(P₁Q₂)), A = ln(η₂/η₁) with η from the law, G = B − A;
 *          var B = Σ CV², var A = Σ (∂ln η/∂H)² s_H² + Σ (∂ln η/∂ln η_p)² CV_ηp² + model variance, var G = var A + var B
 * Units    pressure and flow in any unit, the same at both conditions; haematocrit fraction; plasma viscosity mPa.s with Cel
 * Shape    two conditions of one person and limb
 * Domain   all > 0; plasma viscosity with its temperature, brought to 37 Cel; a law that knows haematocrit
 * Errors   DomainError naming the argument; never NaN
 * Assumes  errors of haematocrit and of pressure and flow are independent; df by Welch and Satterthwaite
 * Source   haemodynamics reference 6.1 to 6.4
 */
export function splitFromMeasurements(
  before: SplitCondition,
  after: SplitCondition,
  choice: LawChoice,
  { tQuantile, confidence = 0.95, modelVariance = 0 }: SplitOptions,
): SplitResult {
  requireNotNegative('modelVariance', modelVariance);
  const law = viscosityLawNamed(choice.law);
  const options = choice.options ?? {};
  const blood = [viscosityOf(before, law, options), viscosityOf(after, law, options)] as const;
  const parts = splitOfChange(
    before.meanPressure.estimate / before.flow.estimate,
    after.meanPressure.estimate / after.flow.estimate,
    blood[0].viscosity,
    blood[1].viscosity,
  );
  const totalParts = [before.meanPressure, before.flow, after.meanPressure, after.flow].map(
    ({ relativeVariance, df }) => ({ variance: relativeVariance, df }),
  );
  const rheologicalParts = [
    ...blood[0].variances,
    ...blood[1].variances,
    { variance: modelVariance, df: Infinity },
  ];
  const estimated = (
    estimate: number,
    variances: readonly { variance: number; df: number }[],
  ): SplitEstimate => {
    const standardError = Math.sqrt(variances.reduce((sum, { variance }) => sum + variance, 0));
    const df = effectiveDegreesOfFreedom(variances);
    const half = standardError === 0 ? 0 : tQuantile((1 + confidence) / 2, df) * standardError;
    return { estimate, standardError, df, lower: estimate - half, upper: estimate + half };
  };
  const total = estimated(parts.total, totalParts);
  const rheological = estimated(parts.rheological, rheologicalParts);
  return {
    law: { id: law.id, version: law.version, options },
    total,
    rheological,
    geometric: estimated(parts.geometric, [...totalParts, ...rheologicalParts]),
    shares: sharesOfChange(parts, {
      standardErrorTotal: total.standardError,
      standardErrorRheological: rheological.standardError,
      tQuantile: tQuantile((1 + confidence) / 2, total.df),
    }),
    equivalentRadiusChangePercent: 100 * Math.expm1(parts.geometric / -4),
    viscosities: [blood[0].viscosity, blood[1].viscosity],
    cautions: uniqueCautions([
      ...blood[0].cautions,
      ...blood[1].cautions,
      ...cautions(['EQUIVALENT_RADIUS', 'LAW_DEPENDENT']),
    ]),
  };
}

/** The split over several laws, so that a reader sees how far the answer depends on the law. */
export function splitOverLaws(
  before: SplitCondition,
  after: SplitCondition,
  options: SplitOptions,
  choices: readonly LawChoice[] = defaultSensitivityLaws,
): readonly SplitResult[] {
  return choices.map((choice) => splitFromMeasurements(before, after, choice, options));
}

function viscosityOf(
  { haematocrit, plasmaViscosity }: SplitCondition,
  law: ViscosityLaw,
  options: LawOptions,
) {
  const temperature = plasmaViscosity.temperature;
  if (temperature === undefined) {
    throw new DomainError(
      'plasmaViscosity.temperature',
      'the temperature at which plasma viscosity was measured',
      temperature,
      'Enter the temperature of the viscometer (37 Cel for an assumed constant).',
    );
  }
  const plasma = temperatureCorrectedViscosity(quantity(plasmaViscosity.estimate), temperature, quantity(37));
  const at = (h: number) => law.viscosity(quantity(h), plasma, options);
  const { viscosity, cautions } = at(haematocrit.estimate);
  // One-sided towards 0.45, which lies inside every law's domain, so that a value at the edge has a slope too.
  const step = haematocrit.estimate < 0.45 ? 1e-5 : -1e-5;
  const slope = Math.log(at(haematocrit.estimate + step).viscosity / viscosity) / step;
  return {
    viscosity,
    cautions,
    variances: [
      { variance: (slope * haematocrit.estimate) ** 2 * haematocrit.relativeVariance, df: haematocrit.df },
      { variance: law.usesPlasmaViscosity ? plasmaViscosity.relativeVariance : 0, df: plasmaViscosity.df },
    ],
  };
}

function uniqueCautions(all: readonly Caution[]): Caution[] {
  return [...new Map(all.map((each) => [each.code, each])).values()];
}
