import { forearmBloodFlowFromCalibratedSlope } from '../haemodynamics/plethysmography/forearm-blood-flow-from-calibrated-slope.ts';
import { forearmBloodFlowFromPercentSlope } from '../haemodynamics/plethysmography/forearm-blood-flow-from-percent-slope.ts';
import { forearmBloodFlowFromVolumeTrace } from '../haemodynamics/plethysmography/forearm-blood-flow-from-volume-trace.ts';
import { forearmBloodFlowVariation } from '../haemodynamics/plethysmography/forearm-blood-flow-variation.ts';
import { gaugeVolumeChangeExact } from '../haemodynamics/plethysmography/gauge-volume-change-exact.ts';
import { gaugeVolumeChange } from '../haemodynamics/plethysmography/gauge-volume-change.ts';
import { infusedControlRatioChange } from '../haemodynamics/plethysmography/infused-control-ratio-change.ts';
import { infusedControlRatio } from '../haemodynamics/plethysmography/infused-control-ratio.ts';
import { leastSquaresLine } from '../haemodynamics/plethysmography/least-squares-line.ts';
import { meanForearmBloodFlow } from '../haemodynamics/plethysmography/mean-forearm-blood-flow.ts';
import { confirmedHyperaemia } from './common-inputs.ts';
import { define } from './define.ts';
import { kept, many, optional, sameUnit, single } from './inputs.ts';

const flows = (name: string, about: string) => many('mL/min/dL', name, about, 'each above 0');
const pairedFlow = (name: string, about: string) => single('mL/min/dL', name, about, 'above 0');
const confirmed = ({ hyperaemia_confirmed }: { readonly hyperaemia_confirmed: number }) => ({
  confirmedHyperaemia: hyperaemia_confirmed === 1,
});
const volumeChangeInputs = {
  delta_length: single('mm', 'lengthening', 'lengthening of the gauge', 'smaller than the circumference'),
  circumference: single('mm', 'circumference', 'circumference of the limb at the gauge', 'above 0'),
};
const uncalibrated = 'Calibrate the gauge at this gain; without a calibration there is no flow.';

/** Venous-occlusion plethysmography: flow from slopes, blocks of readings, and the ratio of two arms. */
export const flowQuantities = [
  define({
    key: 'fbf_from_percent_slope',
    name: 'forearmBloodFlowFromPercentSlope',
    title: 'Forearm blood flow from a calibrated slope',
    inputs: {
      slope: single('%/s', 'slope', 'slope of relative limb volume', 'above 0', {
        whenMissing: 'Give the slope in %/s, or derive fbf_from_calibrated_slope from an uncalibrated one.',
      }),
      hyperaemia_confirmed: confirmedHyperaemia,
    },
    unit: 'mL/min/dL',
    formula: '60 * slope',
    source: 'Wilkinson & Webb 2001, Br J Clin Pharmacol 52:631',
    compute: (given) => forearmBloodFlowFromPercentSlope(given.slope, confirmed(given)),
    cautions: (_, flow) => [flow > 100 && 'HYPERAEMIA_CONFIRMED'],
  }),
  define({
    key: 'fbf_from_calibrated_slope',
    name: 'forearmBloodFlowFromCalibratedSlope',
    title: 'Forearm blood flow from a signal slope and a calibration step',
    inputs: {
      slope: sameUnit(
        single('mV/s', 'slope', 'slope of the signal', 'of the sign of the calibration'),
        'cal_deflection',
        true,
      ),
      cal_deflection: kept(
        single('mV', 'calibrationDeflection', 'deflection of the calibration step', 'other than 0', {
          whenMissing: uncalibrated,
        }),
      ),
      cal_percent: single('%', 'calibrationPercent', 'volume change that the step stands for', 'above 0', {
        whenMissing: uncalibrated,
      }),
      cal_deflection_after: sameUnit(
        optional(
          'mV',
          'calibrationDeflectionAfter',
          'deflection of the step after the readings',
          'other than 0',
        ),
        'cal_deflection',
      ),
      hyperaemia_confirmed: confirmedHyperaemia,
    },
    unit: 'mL/min/dL',
    formula: '60 * slope * cal_percent / cal_deflection',
    source: 'principle of Hokanson 1975 (by citation)',
    compute: (given) =>
      forearmBloodFlowFromCalibratedSlope(
        given.slope,
        given.cal_deflection,
        given.cal_percent,
        confirmed(given),
      ),
    cautions: ({ cal_deflection, cal_deflection_after }, flow) => [
      cal_deflection_after !== undefined &&
        Math.abs(cal_deflection_after / cal_deflection - 1) > 0.05 &&
        'CALIBRATION_DRIFT',
      flow > 100 && 'HYPERAEMIA_CONFIRMED',
    ],
  }),
  define({
    key: 'fbf_slope_regression',
    name: 'forearmBloodFlowFromVolumeTrace',
    title: 'Forearm blood flow from a stretch of the volume trace',
    inputs: {
      t: many('s', 't', 'times', 'strictly rising, at least 2'),
      volume: many('%', 'volume', 'relative limb volume', 'as many as times'),
      hyperaemia_confirmed: confirmedHyperaemia,
    },
    unit: 'mL/min/dL',
    formula: '60 * least-squares slope of volume on t',
    source: 'least squares; window after Junejo et al. 2019, Eur J Appl Physiol',
    compute: (given) => forearmBloodFlowFromVolumeTrace(given.t, given.volume, confirmed(given)),
    cautions: ({ t, volume }, flow) => [
      leastSquaresLine(t, volume).rSquared < 0.9 && 'SLOPE_FIT',
      flow > 100 && 'HYPERAEMIA_CONFIRMED',
    ],
  }),
  define({
    key: 'volume_percent_from_gauge',
    name: 'gaugeVolumeChange',
    title: 'Limb volume change from gauge lengthening, small strain',
    inputs: volumeChangeInputs,
    unit: '%',
    formula: '200 * delta_length / circumference',
    source: 'principle of Whitney 1953 (by citation), factor by algebra',
    compute: ({ delta_length, circumference }) => gaugeVolumeChange(delta_length, circumference),
  }),
  define({
    key: 'volume_percent_from_gauge_exact',
    name: 'gaugeVolumeChangeExact',
    title: 'Limb volume change from gauge lengthening, exact',
    inputs: volumeChangeInputs,
    unit: '%',
    formula: '100 * ((1 + delta_length / circumference)^2 - 1)',
    source: 'geometry of a cylinder',
    compute: ({ delta_length, circumference }) => gaugeVolumeChangeExact(delta_length, circumference),
  }),
  define({
    key: 'fbf_mean',
    name: 'meanForearmBloodFlow',
    title: 'Mean forearm blood flow of a block',
    inputs: { readings: flows('readings', 'accepted readings of the block') },
    unit: 'mL/min/dL',
    formula: 'sum(readings) / n',
    source: 'definition',
    compute: ({ readings }) => meanForearmBloodFlow(readings),
    cautions: ({ readings }) => [
      readings.length < 3 && 'FEW_READINGS',
      readings.length > 1 && forearmBloodFlowVariation(readings) > 15 && 'BLOCK_VARIATION',
    ],
  }),
  define({
    key: 'fbf_cv_percent',
    name: 'forearmBloodFlowVariation',
    title: 'Coefficient of variation of a block of flow readings',
    inputs: { readings: flows('readings', 'accepted readings of the block') },
    unit: '%',
    formula: '100 * SD(n-1) / mean',
    source: 'definition',
    compute: ({ readings }) => forearmBloodFlowVariation(readings),
    cautions: ({ readings }, variation) => [
      readings.length < 3 && 'FEW_READINGS',
      variation > 15 && 'BLOCK_VARIATION',
    ],
  }),
  define({
    key: 'fbf_ratio',
    name: 'infusedControlRatio',
    title: 'Flow of the infused arm over that of the control arm',
    inputs: {
      infused: pairedFlow('infusedFlow', 'flow of the infused arm'),
      control: pairedFlow('controlFlow', 'flow of the control arm'),
    },
    unit: '1',
    formula: 'infused / control',
    source: 'definition',
    compute: ({ infused, control }) => infusedControlRatio(infused, control),
  }),
  define({
    key: 'fbf_ratio_percent_change',
    name: 'infusedControlRatioChange',
    title: 'Change of the infused-to-control ratio',
    inputs: {
      infused_1: pairedFlow('infusedFlow1', 'infused arm, first condition'),
      control_1: pairedFlow('controlFlow1', 'control arm, first condition'),
      infused_2: pairedFlow('infusedFlow2', 'infused arm, second condition'),
      control_2: pairedFlow('controlFlow2', 'control arm, second condition'),
    },
    unit: '%',
    formula: '100 * ((infused_2 / control_2) / (infused_1 / control_1) - 1)',
    source: 'definition',
    compute: (g) => infusedControlRatioChange(g.infused_1, g.control_1, g.infused_2, g.control_2),
  }),
];
