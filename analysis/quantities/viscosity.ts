import type { CautionCodes } from '../haemorheology/ranges.ts';
import { linearCombinationDeviation } from '../haemorheology/linear-combination-deviation.ts';
import {
  bulkLawCautions,
  haematocritCautions,
  highShearCautions,
  quemadaCautions,
  walburnSchneckCautions,
} from '../haemorheology/ranges.ts';
import { brinkmanRelativeViscosity } from '../haemorheology/viscosity/brinkman-relative-viscosity.ts';
import { carreauViscosity } from '../haemorheology/viscosity/carreau-viscosity.ts';
import { carreauYasudaViscosity } from '../haemorheology/viscosity/carreau-yasuda-viscosity.ts';
import { cassonViscosity } from '../haemorheology/viscosity/casson-viscosity.ts';
import { deSimoneViscosity } from '../haemorheology/viscosity/de-simone-viscosity.ts';
import { einsteinRelativeViscosity } from '../haemorheology/viscosity/einstein-relative-viscosity.ts';
import { fahraeusRatio } from '../haemorheology/viscosity/fahraeus-ratio.ts';
import { lichtmanViscosity } from '../haemorheology/viscosity/lichtman-viscosity.ts';
import { matraiStandardisedViscosity } from '../haemorheology/viscosity/matrai-standardised-viscosity.ts';
import { merrillYieldStress } from '../haemorheology/viscosity/merrill-yield-stress.ts';
import { priesBulkRelativeViscosity } from '../haemorheology/viscosity/pries-bulk-relative-viscosity.ts';
import { priesInVitroRelativeViscosity } from '../haemorheology/viscosity/pries-in-vitro-relative-viscosity.ts';
import { priesInVivoRelativeViscosity } from '../haemorheology/viscosity/pries-in-vivo-relative-viscosity.ts';
import { quemadaCokeletViscosity } from '../haemorheology/viscosity/quemada-cokelet-viscosity.ts';
import { quemadaDasViscosity } from '../haemorheology/viscosity/quemada-das-viscosity.ts';
import {
  fixedQuemadaParameters,
  quemadaFixedViscosity,
} from '../haemorheology/viscosity/quemada-fixed-viscosity.ts';
import { snyderViscosity } from '../haemorheology/viscosity/snyder-viscosity.ts';
import { temperatureCorrectedViscosity } from '../haemorheology/viscosity/temperature-corrected-viscosity.ts';
import {
  usualProteinMinusAlbumin,
  walburnSchneckViscosity,
} from '../haemorheology/viscosity/walburn-schneck-viscosity.ts';
import { waterViscosity } from '../haemorheology/viscosity/water-viscosity.ts';
import {
  haematocrit,
  haematocritPercent,
  shearRate,
  temperature,
  tubeDiameter,
  vesselDiameter,
} from './common-inputs.ts';
import { define } from './define.ts';
import { defaulted, kept, optional, single } from './inputs.ts';
import { productUnit } from './product-unit.ts';
import { convert } from '../units/convert.ts';
import { quantity } from '../units/quantity.ts';
import type { Quantity } from '../units/quantity.ts';

const plasma = defaulted(single('mPa.s', 'plasmaViscosity', 'plasma viscosity at 37 Cel', 'above 0'), 1.2);
const plasmaInputs = {
  plasma_viscosity: plasma,
  plasma_temperature: optional(
    'Cel',
    'plasmaTemperature',
    'temperature at which plasma viscosity was measured',
    '10 to 42',
  ),
};
const bulkInputs = { hct: haematocrit, shear_rate: shearRate, ...plasmaInputs, diameter: vesselDiameter };
const percentInputs = { hct_percent: haematocritPercent, diameter: vesselDiameter };
const highShear = { shear_rate: optional('/s', 'shearRate', 'shear rate in the vessel', 'above 0') };
const quemadaSource =
  'Quemada 1978, Rheol Acta 17:632; coefficients of Hund et al. 2017, Fluids 2:10, table 2';

interface PlasmaValues {
  readonly plasma_viscosity: Quantity<'mPa.s'>;
  readonly plasma_temperature: Quantity<'Cel'> | undefined;
}

/** Plasma viscosity at 37 Cel; one given without its temperature is taken as that, with a caution. */
function plasmaAt37({ plasma_viscosity, plasma_temperature }: PlasmaValues): Quantity<'mPa.s'> {
  return plasma_temperature === undefined
    ? plasma_viscosity
    : temperatureCorrectedViscosity(plasma_viscosity, plasma_temperature, quantity(37));
}

const plasmaCautions = ({ plasma_temperature }: PlasmaValues, assumed: ReadonlySet<string>): CautionCodes =>
  assumed.has('plasma_viscosity')
    ? ['PLASMA_VISCOSITY_ASSUMED']
    : [plasma_temperature === undefined && 'TEMPERATURE_ASSUMED'];

/** Viscosity of blood from haematocrit by the published laws, and what goes with them. */
export const viscosityQuantities = [
  define({
    key: 'viscosity_einstein_relative',
    name: 'relativeViscosityEinstein',
    title: 'Relative viscosity, dilute rigid spheres (not for blood)',
    inputs: { hct: haematocrit },
    unit: '1',
    formula: '1 + 2.5 * hct',
    source: 'Einstein 1906, corrected 1911 (from memory)',
    compute: ({ hct }) => einsteinRelativeViscosity(hct),
    cautions: () => ['RIGID_SPHERES'],
  }),
  define({
    key: 'viscosity_brinkman_relative',
    name: 'relativeViscosityBrinkman',
    title: 'Relative viscosity, rigid spheres',
    inputs: { hct: haematocrit, diameter: vesselDiameter },
    unit: '1',
    formula: '(1 - hct)^-2.5',
    source: 'Brinkman 1952; Roscoe 1952 (from memory)',
    compute: ({ hct }) => brinkmanRelativeViscosity(hct),
    cautions: ({ hct, diameter }) => [hct > 0.3 && 'RIGID_SPHERES', ...bulkLawCautions(diameter)],
  }),
  define({
    key: 'viscosity_walburn_schneck',
    name: 'bloodViscosityWalburnSchneck',
    title: 'Blood viscosity, Walburn and Schneck',
    inputs: {
      hct_percent: haematocritPercent,
      shear_rate: shearRate,
      tpma: defaulted(
        single('g/L', 'proteinMinusAlbumin', 'total protein minus albumin', 'at least 0'),
        usualProteinMinusAlbumin,
      ),
      diameter: vesselDiameter,
    },
    unit: 'mPa.s',
    formula:
      '0.797 * exp(0.0608 * hct_percent) * exp(14.585 * tpma / hct_percent^2) * shear_rate^(-0.00499 * hct_percent)',
    source: 'Walburn & Schneck 1976, Biorheology 13:201 (range from memory)',
    compute: (g) => walburnSchneckViscosity(g.hct_percent, g.shear_rate, g.tpma),
    cautions: (g, _, assumed) => [
      assumed.has('tpma') && 'PROTEIN_ASSUMED',
      ...walburnSchneckCautions(g.hct_percent / 100, g.shear_rate),
      ...bulkLawCautions(g.diameter),
    ],
  }),
  define({
    key: 'viscosity_quemada_cokelet',
    name: 'bloodViscosityQuemadaCokelet',
    title: 'Blood viscosity, Quemada with coefficients of Cokelet',
    inputs: bulkInputs,
    unit: 'mPa.s',
    formula:
      'plasma_viscosity * (1 - k * hct / 2)^-2, k = (k0 + kinf * sqrt(shear_rate/gc)) / (1 + sqrt(shear_rate/gc))',
    source: quemadaSource,
    compute: (g) => quemadaCokeletViscosity(g.hct, g.shear_rate, plasmaAt37(g)),
    cautions: (g, _, assumed) => [
      ...quemadaCautions(g.hct, g.shear_rate),
      ...bulkLawCautions(g.diameter),
      ...plasmaCautions(g, assumed),
    ],
  }),
  define({
    key: 'viscosity_quemada_das',
    name: 'bloodViscosityQuemadaDas',
    title: 'Blood viscosity, Quemada with coefficients of Das',
    inputs: bulkInputs,
    unit: 'mPa.s',
    formula: 'as Quemada, k0 = 0.275363 + 2 / (0.100158 + hct)',
    source: quemadaSource,
    compute: (g) => quemadaDasViscosity(g.hct, g.shear_rate, plasmaAt37(g)),
    cautions: (g, _, assumed) => [
      ...haematocritCautions(g.hct, 0.1, 0.65),
      ...bulkLawCautions(g.diameter),
      ...plasmaCautions(g, assumed),
    ],
  }),
  define({
    key: 'viscosity_quemada_fixed',
    name: 'bloodViscosityQuemadaFixed',
    title: 'Blood viscosity, Quemada with fixed parameters',
    inputs: {
      ...bulkInputs,
      k0: defaulted(single('1', 'k0', 'intrinsic viscosity at rest', 'above 0'), fixedQuemadaParameters.k0),
      k_inf: defaulted(
        single('1', 'kInfinity', 'intrinsic viscosity at high shear', 'above 0'),
        fixedQuemadaParameters.kInfinity,
      ),
      gamma_c: defaulted(
        single('/s', 'criticalShearRate', 'critical shear rate', 'above 0'),
        fixedQuemadaParameters.criticalShearRate,
      ),
    },
    unit: 'mPa.s',
    formula: 'as Quemada, with k0, k_inf and gamma_c as given',
    source: 'Quemada 1978; parameters from one public code',
    compute: (g) =>
      quemadaFixedViscosity(g.hct, g.shear_rate, plasmaAt37(g), {
        k0: g.k0,
        kInfinity: g.k_inf,
        criticalShearRate: g.gamma_c,
      }),
    cautions: (g, _, assumed) => [
      ...haematocritCautions(g.hct, 0.4, 0.5),
      ...bulkLawCautions(g.diameter),
      ...plasmaCautions(g, assumed),
    ],
  }),
  define({
    key: 'viscosity_casson',
    name: 'bloodViscosityCasson',
    title: 'Apparent viscosity of a Casson fluid',
    inputs: {
      yield_stress: single('Pa', 'yieldStress', 'yield stress', 'at least 0'),
      casson_viscosity: single('Pa.s', 'cassonConstant', 'Casson viscosity', 'above 0'),
      shear_rate: shearRate,
      diameter: vesselDiameter,
    },
    unit: 'Pa.s',
    formula: '(sqrt(yield_stress / shear_rate) + sqrt(casson_viscosity))^2',
    source: 'Casson 1959; Merrill (from memory)',
    compute: (g) => cassonViscosity(g.yield_stress, g.casson_viscosity, g.shear_rate),
    cautions: (g) => [
      (g.shear_rate < 0.1 || g.shear_rate > 100) && 'SHEAR_RANGE',
      ...bulkLawCautions(g.diameter),
    ],
  }),
  define({
    key: 'merrill_yield_stress',
    name: 'yieldStressMerrill',
    title: 'Yield stress of blood',
    inputs: {
      a: single('{cube_root_of_dyn_per_cm2}', 'coefficient', 'coefficient A, (dyn/cm2)^(1/3)', 'above 0'),
      hct_percent: haematocritPercent,
      hct_critical_percent: single(
        '%',
        'criticalHaematocrit',
        'haematocrit below which nothing yields',
        '0 to 100',
      ),
    },
    unit: 'dyn/cm2',
    formula: '(a * (hct_percent - hct_critical_percent) / 100)^3',
    source: 'Merrill 1963, 1969 (from memory)',
    compute: (g) => merrillYieldStress(g.a, g.hct_percent, g.hct_critical_percent),
  }),
  define({
    key: 'viscosity_carreau',
    name: 'bloodViscosityCarreau',
    title: 'Apparent viscosity, Carreau (no haematocrit)',
    inputs: { shear_rate: single('/s', 'shearRate', 'shear rate', 'at least 0') },
    unit: 'mPa.s',
    formula: '3.45 + 52.55 * (1 + (3.313 * shear_rate)^2)^((0.3568 - 1) / 2)',
    source: 'Cho & Kensey 1991, Biorheology 28:241',
    compute: (g) => carreauViscosity(g.shear_rate),
    cautions: () => ['HAEMATOCRIT_ABSENT'],
  }),
  define({
    key: 'viscosity_carreau_yasuda',
    name: 'bloodViscosityCarreauYasuda',
    title: 'Apparent viscosity, Carreau-Yasuda (no haematocrit)',
    inputs: { shear_rate: single('/s', 'shearRate', 'shear rate', 'at least 0') },
    unit: 'mPa.s',
    formula: '3.45 + 52.55 * (1 + (1.902 * shear_rate)^1.25)^((0.22 - 1) / 1.25)',
    source: 'Cho & Kensey 1991, Biorheology 28:241',
    compute: (g) => carreauYasudaViscosity(g.shear_rate),
    cautions: () => ['HAEMATOCRIT_ABSENT'],
  }),
  define({
    key: 'viscosity_desimone208_ungrouped',
    name: 'bloodViscosityDeSimone',
    title: 'Blood viscosity at 208 /s, de Simone, constant outside the bracket',
    inputs: {
      ...percentInputs,
      total_protein: single('g/dL', 'totalProtein', 'total plasma protein', '2 to 15 g/dL'),
    },
    unit: 'mPa.s',
    formula: '0.12 * hct_percent + 0.17 * total_protein - 2.07',
    source: 'de Simone et al. 1990, Circulation 81:107; grouping inferred',
    compute: (g) => deSimoneViscosity(g.hct_percent, g.total_protein),
    cautions: (g) => [
      'DESIMONE_VARIANT',
      ...haematocritCautions(g.hct_percent / 100, 0.2, 0.65),
      ...bulkLawCautions(g.diameter),
    ],
  }),
  define({
    key: 'viscosity_pries_vitro_relative',
    name: 'relativeViscosityPriesInVitro',
    title: 'Relative viscosity in a glass tube, Pries',
    inputs: { hct: haematocrit, diameter: tubeDiameter, ...highShear },
    unit: '1',
    formula: '1 + (m45 - 1) * ((1 - hct)^C - 1) / (0.55^C - 1), m45 and C of the diameter in um',
    source: 'Pries et al. 1992, Am J Physiol 263:H1770',
    compute: (g) => priesInVitroRelativeViscosity(g.hct, g.diameter),
    cautions: (g) => [...highShearCautions(g.shear_rate, 50), g.hct >= 0.65 && 'TRAPPED_PLASMA'],
  }),
  define({
    key: 'viscosity_pries_vivo_relative',
    name: 'relativeViscosityPriesInVivo',
    title: 'Relative viscosity in living microvessels, Pries',
    inputs: { hct: haematocrit, diameter: tubeDiameter, ...highShear },
    unit: '1',
    formula: '(1 + (m45 - 1) * ((1 - hct)^C - 1) / (0.55^C - 1) * q) * q, q = (D / (D - 1.1))^2',
    source: 'Pries et al. 1994, Circ Res 75:904',
    compute: (g) => priesInVivoRelativeViscosity(g.hct, g.diameter),
    cautions: (g) => [
      g.diameter < 4 && 'DIAMETER_RANGE',
      ...highShearCautions(g.shear_rate, 50),
      g.hct >= 0.65 && 'TRAPPED_PLASMA',
    ],
  }),
  define({
    key: 'viscosity_pries_bulk_relative',
    name: 'relativeViscosityPriesBulk',
    title: 'Relative viscosity in wide vessels, Pries',
    inputs: { hct: haematocrit, diameter: vesselDiameter, ...highShear },
    unit: '1',
    formula: '1 + 2.2 * ((1 - hct)^-0.8 - 1) / (0.55^-0.8 - 1)',
    source: 'Pries et al. 1992, limit for an infinite diameter',
    compute: (g) => priesBulkRelativeViscosity(g.hct),
    cautions: (g) => [
      ...bulkLawCautions(g.diameter),
      ...highShearCautions(g.shear_rate, 50),
      g.hct >= 0.65 && 'TRAPPED_PLASMA',
    ],
  }),
  define({
    key: 'fahraeus_tube_over_discharge',
    name: 'fahraeusRatio',
    title: 'Tube over discharge haematocrit',
    inputs: { hct: haematocrit, diameter: tubeDiameter },
    unit: '1',
    formula: 'hct + (1 - hct) * (1 + 1.7 * exp(-0.415 * diameter) - 0.6 * exp(-0.011 * diameter))',
    source: 'Pries et al. 1990, Circ Res 67:826',
    compute: (g) => fahraeusRatio(g.hct, g.diameter),
  }),
  define({
    key: 'viscosity_snyder',
    name: 'bloodViscositySnyder',
    title: 'High-shear blood viscosity from haematocrit and temperature, Snyder',
    inputs: { ...percentInputs, temperature },
    unit: 'mPa.s',
    formula: '2.03 * exp((0.0322 - 0.000108 * temperature) * hct_percent - 0.02 * temperature)',
    source: 'Snyder 1971 as coded in one public repository',
    compute: (g) => snyderViscosity(g.hct_percent, g.temperature),
    cautions: (g) => [
      (g.temperature < 20 || g.temperature > 40) && 'TEMPERATURE_RANGE',
      g.hct_percent >= 65 && 'TRAPPED_PLASMA',
      ...bulkLawCautions(g.diameter),
    ],
  }),
  define({
    key: 'viscosity_lichtman',
    name: 'bloodViscosityLichtman',
    title: 'Blood viscosity, regression on haematocrit',
    inputs: percentInputs,
    unit: 'mPa.s',
    formula: '10^(0.01138 * hct_percent + 0.03699)',
    source: 'figure of Lichtman 1987 by way of an algorithm page',
    compute: (g) => lichtmanViscosity(g.hct_percent),
    cautions: (g) => [...haematocritCautions(g.hct_percent / 100, 0.2, 0.65), ...bulkLawCautions(g.diameter)],
  }),
  define({
    key: 'viscosity_water_vogel',
    name: 'waterViscosity',
    title: 'Viscosity of water',
    inputs: { temperature },
    unit: 'mPa.s',
    formula: '0.02414 * 10^(247.8 / (temperature + 133.15))',
    source: 'engineering table (Vogel form)',
    compute: (g) => waterViscosity(g.temperature),
  }),
  define({
    key: 'viscosity_temperature_corrected',
    name: 'temperatureCorrectedViscosity',
    title: 'Viscosity brought to another temperature',
    inputs: {
      viscosity: single('mPa.s', 'viscosity', 'viscosity as measured', 'above 0'),
      temperature_from: single('Cel', 'measuredAt', 'temperature of the measurement', '10 to 42', {
        whenMissing:
          'A viscosity without its temperature cannot be used: enter the temperature of the viscometer.',
      }),
      temperature_to: single('Cel', 'wantedAt', 'temperature wanted', '10 to 42'),
    },
    unit: 'mPa.s',
    formula: 'viscosity * water(temperature_to) / water(temperature_from)',
    source: 'common practice; Eckmann 2000',
    compute: (g) => temperatureCorrectedViscosity(g.viscosity, g.temperature_from, g.temperature_to),
    cautions: (g) => [(g.temperature_from < 20 || g.temperature_to < 20) && 'TEMPERATURE_RANGE'],
  }),
  define({
    key: 'viscosity_matrai_standardised',
    name: 'matraiStandardisedViscosity',
    title: 'Blood viscosity at a standard haematocrit',
    inputs: {
      viscosity: single('mPa.s', 'viscosity', 'blood viscosity as measured', 'above 0'),
      plasma_viscosity: single(
        'mPa.s',
        'plasmaViscosity',
        'plasma viscosity at the same temperature',
        'above 0',
      ),
      hct: haematocrit,
      hct_standard: single('1', 'standardHaematocrit', 'standard haematocrit', 'above 0, below 1', {
        check: 'haematocrit',
      }),
    },
    unit: 'mPa.s',
    formula: 'plasma_viscosity * (viscosity / plasma_viscosity)^(hct_standard / hct)',
    source: 'Matrai et al. 1987 (from memory)',
    compute: (g) => matraiStandardisedViscosity(g.viscosity, g.plasma_viscosity, g.hct, g.hct_standard),
    cautions: (g) => [
      ...haematocritCautions(g.hct, 0.2, 0.6),
      ...haematocritCautions(g.hct_standard, 0.2, 0.6),
    ],
  }),
  define({
    key: 'linear_combination_sd',
    name: 'linearCombinationDeviation',
    title: 'Standard deviation of a sum of two independent terms',
    inputs: {
      c1: kept(single('1', 'coefficient1', 'first coefficient', 'finite')),
      sd1: kept(single('1', 'deviation1', 'SD of the first variable', 'at least 0')),
      c2: kept(single('1', 'coefficient2', 'second coefficient', 'finite')),
      sd2: kept(single('1', 'deviation2', 'SD of the second variable', 'at least 0')),
    },
    unit: ({ c1, sd1 }) => productUnit(c1, sd1),
    unitAbout: 'unit of c1 times unit of sd1',
    formula: 'sqrt((c1 * sd1)^2 + (c2 * sd2)^2)',
    source: 'propagation of errors; Tamariz 2008, Am J Epidemiol 168:1153, table 3',
    compute: (g, units) => {
      const scale = convert(1, productUnit(units.c2, units.sd2), productUnit(units.c1, units.sd1));
      return quantity(linearCombinationDeviation(g.c1, g.sd1, g.c2 * scale, g.sd2));
    },
  }),
];
