import { formFactorFromHeartRate } from '../haemodynamics/pressure/form-factor-from-heart-rate.ts';
import { formFactorFromMeanPressure } from '../haemodynamics/pressure/form-factor-from-mean-pressure.ts';
import {
  bloodDensity,
  hydrostaticPressure,
  standardGravity,
} from '../haemodynamics/pressure/hydrostatic-pressure.ts';
import { meanAorticPressure } from '../haemodynamics/pressure/mean-aortic-pressure.ts';
import { meanArterialPressureFormFactor } from '../haemodynamics/pressure/mean-arterial-pressure-form-factor.ts';
import { meanArterialPressureHeartRate } from '../haemodynamics/pressure/mean-arterial-pressure-heart-rate.ts';
import { meanArterialPressureOneThird } from '../haemodynamics/pressure/mean-arterial-pressure-one-third.ts';
import { meanPressureFromWaveform } from '../haemodynamics/pressure/mean-pressure-from-waveform.ts';
import { pulsePressure } from '../haemodynamics/pressure/pulse-pressure.ts';
import {
  density,
  diastolicPressure,
  heartRate,
  meanArterialPressure,
  systolicPressure,
} from './common-inputs.ts';
import { define } from './define.ts';
import { defaulted, flag, many, optional, single } from './inputs.ts';
import { convert } from '../units/convert.ts';

const cuff = { sbp: systolicPressure, dbp: diastolicPressure };
const anyPressure = (unit: 'mm[Hg]' | 'Pa' | 'kPa' | 'cm[H2O]') =>
  single(unit, 'pressure', 'pressure', 'finite');

/** Arterial pressures, mean pressure by its several definitions, hydrostatics and conversions. */
export const pressureQuantities = [
  define({
    key: 'pulse_pressure',
    name: 'pulsePressure',
    title: 'Pulse pressure',
    inputs: cuff,
    unit: 'mm[Hg]',
    formula: 'sbp - dbp',
    source: 'definition',
    compute: ({ sbp, dbp }) => pulsePressure(sbp, dbp),
  }),
  define({
    key: 'map_third',
    name: 'meanArterialPressureOneThird',
    title: 'Mean arterial pressure, one-third rule',
    inputs: { ...cuff, hr: optional('/min', 'heartRate', 'heart rate', 'above 0') },
    unit: 'mm[Hg]',
    formula: 'dbp + (sbp - dbp) / 3',
    source: 'textbook',
    compute: ({ sbp, dbp }) => meanArterialPressureOneThird(sbp, dbp),
    cautions: ({ hr }) => [hr !== undefined && (hr < 50 || hr > 100) && 'HEART_RATE_RANGE'],
  }),
  define({
    key: 'map_form_factor',
    name: 'meanArterialPressureFormFactor',
    title: 'Mean arterial pressure with a form factor',
    inputs: {
      ...cuff,
      form_factor: single('1', 'formFactor', 'fraction of pulse pressure added to diastolic', '0.2 to 0.6'),
    },
    unit: 'mm[Hg]',
    formula: 'dbp + form_factor * (sbp - dbp)',
    source:
      '0.412 Meaney 2000 (from memory), 0.40 Bos 2007 J Hypertens 25:751; Papaioannou 2016 Hypertens Res',
    compute: ({ sbp, dbp, form_factor }) => meanArterialPressureFormFactor(sbp, dbp, form_factor),
  }),
  define({
    key: 'map_hr_corrected',
    name: 'meanArterialPressureHeartRate',
    title: 'Mean arterial pressure, corrected for heart rate',
    inputs: { ...cuff, hr: heartRate },
    unit: 'mm[Hg]',
    formula: 'dbp + (0.33 + 0.0012 * hr) * (sbp - dbp)',
    source: 'Moran 1995 (from memory); Razminia 2004, Catheter Cardiovasc Interv 63:419',
    compute: ({ sbp, dbp, hr }) => meanArterialPressureHeartRate(sbp, dbp, hr),
    cautions: ({ hr }) => ['AORTIC_FORMULA', (hr < 40 || hr > 150) && 'HEART_RATE_RANGE'],
  }),
  define({
    key: 'map_aortic_chemla',
    name: 'meanAorticPressure',
    title: 'Mean aortic root pressure',
    inputs: cuff,
    unit: 'mm[Hg]',
    formula: 'dbp + (sbp - dbp) / 3 + 5',
    source: 'Chemla et al. 2002, Clin Sci 103:7',
    compute: ({ sbp, dbp }) => meanAorticPressure(sbp, dbp),
    cautions: () => ['AORTIC_FORMULA'],
  }),
  define({
    key: 'map_form_factor_log_hr',
    name: 'formFactorFromHeartRate',
    title: 'Form factor from the logarithm of heart rate',
    inputs: { hr: heartRate },
    unit: '1',
    formula: '0.086 * ln(hr - 41.2) + 0.079',
    source: 'preprint abstract',
    compute: ({ hr }) => formFactorFromHeartRate(hr),
    cautions: () => ['PREPRINT_FORMULA'],
  }),
  define({
    key: 'map_waveform',
    name: 'meanPressureFromWaveform',
    title: 'Mean pressure as the time average of a waveform',
    inputs: {
      t: many('s', 't', 'times', 'strictly rising, at least 2'),
      p: many('mm[Hg]', 'pressures', 'pressures', 'as many as times'),
    },
    unit: 'mm[Hg]',
    formula: 'trapezoidal integral of p over t / (t_end - t_0)',
    source: 'definition',
    compute: ({ t, p }) => meanPressureFromWaveform(t, p),
    cautions: ({ t }) => [(t.length - 1) / (t.at(-1)! - t[0]!) < 100 && 'WAVEFORM_SAMPLING'],
  }),
  define({
    key: 'form_factor_from_map',
    name: 'formFactorFromMeanPressure',
    title: 'Measured form factor',
    inputs: { ...cuff, map: meanArterialPressure },
    unit: '1',
    formula: '(map - dbp) / (sbp - dbp)',
    source: 'definition',
    compute: ({ sbp, dbp, map }) => formFactorFromMeanPressure(sbp, dbp, map),
    cautions: (_, k) => [(k < 0.2 || k > 0.6) && 'FORM_FACTOR_RANGE'],
  }),
  define({
    key: 'hydrostatic_pressure',
    name: 'hydrostaticPressure',
    title: 'Hydrostatic pressure of a column of fluid',
    inputs: {
      density: defaulted(density, bloodDensity),
      g: defaulted(single('m/s2', 'gravity', 'acceleration of gravity', 'above 0'), standardGravity),
      height: single(
        'm',
        'height',
        'how far the measuring point lies below the heart',
        'within 0.6 m unless on a standing leg',
      ),
      standing_leg: flag('standingLeg', 'measured on a standing leg'),
    },
    unit: 'mm[Hg]',
    formula: 'density * g * height',
    source: 'statics; Raamat et al. 2009, Med Eng Phys 31:522',
    compute: ({ density, g, height, standing_leg }) =>
      convert(hydrostaticPressure(height, density, g, standing_leg === 1), 'Pa', 'mm[Hg]'),
  }),
  define({
    key: 'mmhg_to_pa',
    name: 'pressureInPascal',
    title: 'Pressure from millimetres of mercury to pascal',
    inputs: { p: anyPressure('mm[Hg]') },
    unit: 'Pa',
    formula: 'p * 133.322387415',
    source: 'conventional millimetre of mercury; UCUM rounds it to 133.322',
    compute: ({ p }) => convert(p, 'mm[Hg]', 'Pa'),
  }),
  ...(['Pa', 'kPa', 'cm[H2O]'] as const).map((unit) =>
    define({
      key: { Pa: 'pa_to_mmhg', kPa: 'kpa_to_mmhg', 'cm[H2O]': 'cmh2o_to_mmhg' }[unit],
      name: {
        Pa: 'pressureFromPascal',
        kPa: 'pressureFromKilopascal',
        'cm[H2O]': 'pressureFromCentimetresOfWater',
      }[unit],
      title: `Pressure from ${unit} to millimetres of mercury`,
      inputs: { p: anyPressure(unit) },
      unit: 'mm[Hg]',
      formula: {
        Pa: 'p / 133.322387415',
        kPa: 'p * 1000 / 133.322387415',
        'cm[H2O]': 'p * 98.0665 / 133.322387415',
      }[unit],
      source: 'conventional millimetre of mercury; 1 cm[H2O] = 98.0665 Pa',
      compute: ({ p }) => convert(p, unit, 'mm[Hg]'),
    }),
  ),
];
