import { equivalentRadiusChange } from '../haemodynamics/split/equivalent-radius-change.ts';
import { logChangeDeviation } from '../haemodynamics/split/log-change-deviation.ts';
import { logChange } from '../haemodynamics/split/log-change.ts';
import { logarithmicMeanParts } from '../haemodynamics/split/logarithmic-mean-parts.ts';
import { pairedLogT } from '../haemodynamics/split/paired-log-t.ts';
import { sequentialParts } from '../haemodynamics/split/sequential-parts.ts';
import { shapleyParts } from '../haemodynamics/split/shapley-parts.ts';
import { shareDeltaDeviation } from '../haemodynamics/split/share-delta-deviation.ts';
import { refusalReasons, sharesNotMeaningful, sharesOfChange } from '../haemodynamics/split/shares.ts';
import { splitOfChange } from '../haemodynamics/split/split-of-change.ts';
import type { CautionCodes } from '../haemorheology/ranges.ts';
import { define } from './define.ts';
import { defaulted, kept, many, optional, sameUnit, single } from './inputs.ts';
import type { Values } from './inputs.ts';
import { geometricMeanRatio } from '../haemodynamics/split/geometric-mean-ratio.ts';
import { DomainError } from '../units/errors.ts';
import { quantity } from '../units/quantity.ts';

const resistancePair = {
  r1: kept(single('mm[Hg].min.dL/mL', 'resistance1', 'resistance before', 'above 0'), 'Pa.s', 'Pa.s/m3'),
  r2: sameUnit(single('mm[Hg].min.dL/mL', 'resistance2', 'resistance after', 'above 0'), 'r1'),
  eta1: single('mPa.s', 'viscosity1', 'blood viscosity before', 'above 0'),
  eta2: single('mPa.s', 'viscosity2', 'blood viscosity after', 'above 0'),
};
const shareInputs = {
  ...resistancePair,
  sd_log_eta: optional(
    '1',
    'standardErrorRheological',
    'standard error of the log-change of viscosity',
    'at least 0',
  ),
  sd_log_r: optional(
    '1',
    'standardErrorTotal',
    'standard error of the log-change of resistance',
    'at least 0',
  ),
  t_quantile: defaulted(
    single('1', 'tQuantile', 'quantile of t for the degrees of freedom', 'above 0'),
    1.959963984540054,
  ),
};
const unitOfR1 = ({ r1 }: { readonly r1: string }) => r1;
const r1Unit = 'that of r1';
const pairs = {
  before: kept(many('1', 'before', 'values before', 'each above 0')),
  after: sameUnit(many('1', 'after', 'values after, in the same order', 'each above 0'), 'before'),
};
const variation = (name: string, about: string) => single('1', name, about, 'at least 0');

/** Both shares, or the refusal of rule 6.3 as an error. */
function sharesOrRefusal(given: Values<typeof shareInputs>) {
  const { r1, r2, eta1, eta2, sd_log_r, sd_log_eta, t_quantile } = given;
  const known = sd_log_r !== undefined && sd_log_eta !== undefined;
  const shares = sharesOfChange(
    splitOfChange(r1, r2, eta1, eta2),
    known
      ? { standardErrorTotal: sd_log_r, standardErrorRheological: sd_log_eta, tQuantile: t_quantile }
      : undefined,
  );
  if (shares.shown) return shares;
  throw new DomainError(
    'resistance2',
    `changed clearly, by more than 5 %, and not against viscosity or hindrance, for a share (${refusalReasons[shares.reason]})`,
    r2,
    `Show the log-changes: ${sharesNotMeaningful}. Standard errors of both log-changes (sd_log_r, sd_log_eta) may allow shares.`,
  );
}

const shareCautions = (given: Values<typeof shareInputs>): CautionCodes => [
  (given.sd_log_r === undefined || given.sd_log_eta === undefined) && 'SHARE_WITHOUT_INTERVAL',
  'LAW_DEPENDENT',
];

/** The split of a change of resistance into a rheological and a vasomotor part. */
export const splitQuantities = [
  define({
    key: 'log_change',
    name: 'logChange',
    title: 'Change on the natural log scale',
    inputs: {
      x1: kept(single('1', 'before', 'value before', 'above 0')),
      x2: sameUnit(single('1', 'after', 'value after', 'above 0'), 'x1'),
    },
    unit: '1',
    formula: 'ln(x2 / x1)',
    source: 'definition',
    compute: ({ x1, x2 }) => logChange(x1, x2),
  }),
  define({
    key: 'log_change_hindrance',
    name: 'logChangeHindrance',
    title: 'Log-change of hindrance: the vasomotor part',
    inputs: resistancePair,
    unit: '1',
    formula: 'ln(r2 / r1) - ln(eta2 / eta1)',
    source: 'R = eta Z',
    compute: (g) => splitOfChange(g.r1, g.r2, g.eta1, g.eta2).geometric,
    cautions: () => ['LAW_DEPENDENT'],
  }),
  define({
    key: 'share_rheological',
    name: 'rheologicalShare',
    title: 'Rheological share of a change of resistance',
    inputs: shareInputs,
    unit: '1',
    formula: 'ln(eta2 / eta1) / ln(r2 / r1), shown only where the change is clear and unopposed',
    source: 'R = eta Z; rule of haemodynamics reference 6.3',
    compute: (g) => sharesOrRefusal(g).rheological,
    cautions: shareCautions,
  }),
  define({
    key: 'share_vasomotor',
    name: 'vasomotorShare',
    title: 'Vasomotor share of a change of resistance',
    inputs: shareInputs,
    unit: '1',
    formula: '1 - share_rheological, shown only where the change is clear and unopposed',
    source: 'R = eta Z; rule of haemodynamics reference 6.3',
    compute: (g) => sharesOrRefusal(g).vasomotor,
    cautions: shareCautions,
  }),
  define({
    key: 'shapley_rheological',
    name: 'shapleyRheologicalPart',
    title: 'Rheological part in resistance units, symmetrical',
    inputs: resistancePair,
    unit: unitOfR1,
    unitAbout: r1Unit,
    formula: '(eta2 - eta1) * (r1/eta1 + r2/eta2) / 2',
    source: 'Shapley value of two factors',
    compute: (g) => quantity(shapleyParts(g.r1, g.r2, g.eta1, g.eta2).rheological),
  }),
  define({
    key: 'shapley_vasomotor',
    name: 'shapleyVasomotorPart',
    title: 'Vasomotor part in resistance units, symmetrical',
    inputs: resistancePair,
    unit: unitOfR1,
    unitAbout: r1Unit,
    formula: '(r2/eta2 - r1/eta1) * (eta1 + eta2) / 2',
    source: 'Shapley value of two factors',
    compute: (g) => quantity(shapleyParts(g.r1, g.r2, g.eta1, g.eta2).vasomotor),
  }),
  define({
    key: 'lmdi_rheological',
    name: 'logarithmicMeanRheologicalPart',
    title: 'Rheological part in resistance units, logarithmic mean',
    inputs: resistancePair,
    unit: unitOfR1,
    unitAbout: r1Unit,
    formula: '(r2 - r1) / ln(r2 / r1) * ln(eta2 / eta1)',
    source: 'Ang 2004 (from memory); Ang, Huang & Mu 2009, Energy Policy',
    compute: (g) => quantity(logarithmicMeanParts(g.r1, g.r2, g.eta1, g.eta2).rheological),
  }),
  define({
    key: 'lmdi_vasomotor',
    name: 'logarithmicMeanVasomotorPart',
    title: 'Vasomotor part in resistance units, logarithmic mean',
    inputs: resistancePair,
    unit: unitOfR1,
    unitAbout: r1Unit,
    formula: '(r2 - r1) / ln(r2 / r1) * (ln(r2 / r1) - ln(eta2 / eta1))',
    source: 'Ang 2004 (from memory); Ang, Huang & Mu 2009, Energy Policy',
    compute: (g) => quantity(logarithmicMeanParts(g.r1, g.r2, g.eta1, g.eta2).vasomotor),
  }),
  define({
    key: 'sequential_rheological_first',
    name: 'sequentialRheologicalPart',
    title: 'Rheological part in resistance units when viscosity moves first',
    inputs: resistancePair,
    unit: unitOfR1,
    unitAbout: r1Unit,
    formula: 'r1/eta1 * (eta2 - eta1)',
    source: 'algebra',
    compute: (g) => quantity(sequentialParts(g.r1, g.r2, g.eta1, g.eta2).rheologicalFirst),
    cautions: () => ['ORDER_DEPENDENT'],
  }),
  define({
    key: 'interaction_term',
    name: 'interactionTerm',
    title: 'Interaction left over when both parts use the first state',
    inputs: resistancePair,
    unit: unitOfR1,
    unitAbout: r1Unit,
    formula: '(eta2 - eta1) * (r2/eta2 - r1/eta1)',
    source: 'algebra',
    compute: (g) => quantity(sequentialParts(g.r1, g.r2, g.eta1, g.eta2).interaction),
  }),
  define({
    key: 'radius_percent_change',
    name: 'equivalentRadiusChange',
    title: 'Change of the equivalent radius',
    inputs: resistancePair,
    unit: '%',
    formula: '100 * ((z1 / z2)^(1/4) - 1), z = r / eta',
    source: 'Hagen-Poiseuille',
    compute: (g) => equivalentRadiusChange(g.r1, g.r2, g.eta1, g.eta2),
    cautions: () => ['EQUIVALENT_RADIUS', 'LAW_DEPENDENT'],
  }),
  define({
    key: 'log_change_sd_resistance',
    name: 'logChangeDeviation',
    title: 'Standard deviation of the log-change of resistance',
    inputs: {
      cv_p1: variation('pressureVariation1', 'relative SD of pressure before'),
      cv_f1: variation('flowVariation1', 'relative SD of flow before'),
      cv_p2: variation('pressureVariation2', 'relative SD of pressure after'),
      cv_f2: variation('flowVariation2', 'relative SD of flow after'),
    },
    unit: '1',
    formula: 'sqrt(cv_p1^2 + cv_f1^2 + cv_p2^2 + cv_f2^2)',
    source: 'propagation of errors, first order',
    compute: (g) => logChangeDeviation(g.cv_p1, g.cv_f1, g.cv_p2, g.cv_f2),
  }),
  define({
    key: 'share_sd_delta',
    name: 'shareDeltaDeviation',
    title: 'Quick standard deviation of the rheological share',
    inputs: {
      log_eta: single('1', 'rheologicalLogChange', 'log-change of viscosity', 'finite'),
      log_r: single('1', 'totalLogChange', 'log-change of resistance', 'other than 0'),
      sd_log_eta: single('1', 'rheologicalDeviation', 'its SD', 'at least 0'),
      sd_log_r: single('1', 'totalDeviation', 'SD of the log-change of resistance', 'at least 0'),
    },
    unit: '1',
    formula: 'sqrt(sd_log_eta^2 + (log_eta / log_r)^2 * sd_log_r^2) / |log_r|',
    source: 'delta method',
    compute: (g) => shareDeltaDeviation(g.log_eta, g.log_r, g.sd_log_eta, g.sd_log_r),
    cautions: () => ['DELTA_INTERVAL'],
  }),
  define({
    key: 'geometric_mean_ratio',
    name: 'geometricMeanRatio',
    title: 'Geometric mean of ratios after over before',
    inputs: pairs,
    unit: '1',
    formula: 'exp(mean(ln(after / before)))',
    source: 'definition',
    compute: ({ before, after }) => geometricMeanRatio(before, after),
  }),
  define({
    key: 'paired_log_t',
    name: 'pairedLogT',
    title: 'Paired t statistic of log-changes',
    inputs: pairs,
    unit: '1',
    formula: 'mean / (SD / sqrt(n)) of ln(after / before)',
    source: 'Student 1908',
    compute: ({ before, after }) => pairedLogT(before, after),
  }),
];
