import type { CautionCode } from '../cautions/cautions.ts';
import { flag, optional, single } from './inputs.ts';

export const systolicPressure = single(
  'mm[Hg]',
  'systolicPressure',
  'systolic arterial pressure',
  'above the diastolic pressure',
);
export const diastolicPressure = single(
  'mm[Hg]',
  'diastolicPressure',
  'diastolic arterial pressure',
  'at least 0',
);
export const meanArterialPressure = single(
  'mm[Hg]',
  'meanArterialPressure',
  'mean arterial pressure',
  'above 0',
);
export const centralVenousPressure = single(
  'mm[Hg]',
  'centralVenousPressure',
  'central venous pressure',
  'below the mean arterial pressure',
  {
    whenMissing:
      'Without a central venous pressure derive tpr_wood (total peripheral resistance); 0 is never assumed.',
  },
);
export const meanPulmonaryArterialPressure = single(
  'mm[Hg]',
  'meanPulmonaryArterialPressure',
  'mean pulmonary arterial pressure',
  'above the wedge pressure',
);
export const pulmonaryArteryWedgePressure = single(
  'mm[Hg]',
  'pulmonaryArteryWedgePressure',
  'pulmonary artery wedge pressure',
  'below the mean pulmonary arterial pressure',
);
export const cardiacOutputInput = single('L/min', 'cardiacOutput', 'cardiac output', 'above 0');
export const forearmBloodFlow = single('mL/min/dL', 'forearmBloodFlow', 'forearm blood flow', 'above 0');
export const heartRate = single('/min', 'heartRate', 'heart rate', 'above 0');
export const minutesApart = optional('min', 'minutesApart', 'time between pressure and flow', 'at least 0');
export const confirmedHyperaemia = flag(
  'confirmedHyperaemia',
  'the protocol marks hyperaemia and a person confirmed the reading',
);

export const viscosity = single('Pa.s', 'viscosity', 'viscosity', 'above 0');
export const length = single('m', 'length', 'length of the vessel', 'above 0');
export const radius = single('m', 'radius', 'radius of the vessel', 'above 0');
export const pressureDifference = single('Pa', 'pressureDifference', 'pressure drop', 'above 0');
export const volumeFlow = single('m3/s', 'flow', 'volume flow', 'above 0');
export const density = single('kg/m3', 'density', 'density of the fluid', 'above 0');

export const haematocrit = single('1', 'haematocrit', 'haematocrit', 'a fraction from 0 to below 1', {
  check: 'haematocrit',
});
export const haematocritPercent = single('%', 'haematocrit', 'haematocrit', 'from 5 to 75 %', {
  check: 'haematocrit',
});
export const haemoglobin = single('g/dL', 'haemoglobin', 'haemoglobin concentration', 'from 2 to 25 g/dL', {
  check: 'haemoglobin',
});
export const shearRate = single('/s', 'shearRate', 'shear rate', 'above 0');
export const tubeDiameter = single('um', 'diameter', 'diameter of the vessel', 'within the range of the law');
export const vesselDiameter = optional(
  'um',
  'diameter',
  'diameter of the vessel that the viscosity is for',
  'at least 10 um',
);
export const temperature = single('Cel', 'temperature', 'temperature', 'within the range of the law');

/** Pressure and flow must be of one moment: 5 minutes by default. */
export function timingCautions({
  minutes_apart,
}: {
  readonly minutes_apart: number | undefined;
}): CautionCode | false {
  return minutes_apart !== undefined && minutes_apart > 5 && 'NOT_SIMULTANEOUS';
}
