import { allometricDilationRatio } from '../haemodynamics/doppler/allometric-dilation-ratio.ts';
import { dopplerBloodFlow } from '../haemodynamics/doppler/doppler-blood-flow.ts';
import { flowMediatedDilation } from '../haemodynamics/doppler/flow-mediated-dilation.ts';
import { shearAreaAboveBaseline } from '../haemodynamics/doppler/shear-area-above-baseline.ts';
import { shearRateFromMeanVelocity } from '../haemodynamics/doppler/shear-rate-from-mean-velocity.ts';
import { shearRateFromPeakVelocity } from '../haemodynamics/doppler/shear-rate-from-peak-velocity.ts';
import { trapezoidArea } from '../haemodynamics/trapezoid-area.ts';
import { define } from './define.ts';
import { kept, many, optional, single } from './inputs.ts';
import { productUnit } from './product-unit.ts';
import { quantity } from '../units/quantity.ts';

const angle = optional('deg', 'insonationAngle', 'insonation angle', '0 to 60');
const arteryDiameter = single('mm', 'diameter', 'diameter of the artery', 'above 0');
const diameters = {
  d_base: single('mm', 'baselineDiameter', 'baseline diameter', 'above 0'),
  d_peak: single('mm', 'peakDiameter', 'peak diameter', 'above 0'),
};
const constricted = ({ d_base, d_peak }: { readonly d_base: number; readonly d_peak: number }) => [
  d_peak < d_base - 0.1 && ('SMALL_DIAMETER_CHANGE' as const),
];

/** Doppler ultrasound of the brachial artery, shear, and flow-mediated dilation. */
export const dopplerQuantities = [
  define({
    key: 'doppler_flow',
    name: 'dopplerBloodFlow',
    title: 'Blood flow in an artery by Doppler ultrasound',
    inputs: {
      diameter: arteryDiameter,
      v_mean: single('cm/s', 'meanVelocity', 'time-mean velocity', 'above 0'),
      angle,
    },
    unit: 'mL/min',
    formula: 'pi * (diameter / 20)^2 * v_mean * 60',
    source: 'continuity',
    compute: (g) => dopplerBloodFlow(g.diameter, g.v_mean, g.angle),
  }),
  define({
    key: 'shear_rate_8',
    name: 'shearRateFromMeanVelocity',
    title: 'Shear rate, 8 V/d with the mean velocity',
    inputs: {
      v_mean: single('cm/s', 'meanVelocity', 'mean velocity', 'finite'),
      diameter: arteryDiameter,
      angle,
    },
    unit: '/s',
    formula: '8 * v_mean / diameter',
    source: 'Poiseuille',
    compute: (g) => shearRateFromMeanVelocity(g.v_mean, g.diameter, g.angle),
  }),
  define({
    key: 'shear_rate_4',
    name: 'shearRateFromPeakVelocity',
    title: 'Shear rate, 4 V/d with the centre-line velocity',
    inputs: {
      velocity: single('cm/s', 'peakVelocity', 'centre-line velocity', 'finite'),
      diameter: arteryDiameter,
      angle,
    },
    unit: '/s',
    formula: '4 * velocity / diameter',
    source: 'Poiseuille',
    compute: (g) => shearRateFromPeakVelocity(g.velocity, g.diameter, g.angle),
    cautions: () => ['VELOCITY_KIND'],
  }),
  define({
    key: 'fmd_percent',
    name: 'flowMediatedDilation',
    title: 'Flow-mediated dilation',
    inputs: diameters,
    unit: '%',
    formula: '100 * (d_peak - d_base) / d_base',
    source: 'Thijssen et al. 2019, Eur Heart J 40:2534',
    compute: (g) => flowMediatedDilation(g.d_base, g.d_peak),
    cautions: constricted,
  }),
  define({
    key: 'fmd_allometric_ratio',
    name: 'allometricDilationRatio',
    title: 'Peak diameter scaled by the baseline diameter',
    inputs: {
      ...diameters,
      exponent: single('1', 'exponent', "the study's own allometric exponent", 'above 0, at most 2'),
    },
    unit: '{mm_to_the_1-b}',
    formula: 'd_peak / d_base^exponent',
    source: 'Atkinson et al. 2013, J Hypertens 31:287',
    compute: (g) => allometricDilationRatio(g.d_base, g.d_peak, g.exponent),
    cautions: (g) => ['STUDY_EXPONENT', ...constricted(g)],
  }),
  define({
    key: 'auc_trapezoid',
    name: 'areaUnderCurve',
    title: 'Area under a curve, trapezoidal',
    inputs: {
      t: kept(many('s', 't', 'times, or doses on their axis', 'strictly rising, at least 2')),
      y: kept(many('1', 'y', 'values', 'as many as times')),
    },
    unit: ({ t, y }) => productUnit(y, t),
    unitAbout: 'unit of y times unit of t',
    formula: 'sum((t[i+1] - t[i]) * (y[i] + y[i+1]) / 2)',
    source: 'definition',
    compute: ({ t, y }) => quantity(trapezoidArea(t, y, 'y')),
  }),
  define({
    key: 'shear_auc_above_baseline',
    name: 'shearAreaAboveBaseline',
    title: 'Area of shear rate above baseline up to the peak diameter',
    inputs: {
      t: many('s', 't', 'times from cuff release to peak diameter', 'strictly rising, at least 2'),
      shear: many('/s', 'shearRates', 'shear rates', 'as many as times'),
      baseline: single('/s', 'baseline', 'baseline shear rate', 'finite'),
    },
    unit: '1',
    formula: 'trapezoidal integral of (shear - baseline) over t',
    source: 'definition',
    compute: (g) => shearAreaAboveBaseline(g.t, g.shear, g.baseline),
  }),
];
