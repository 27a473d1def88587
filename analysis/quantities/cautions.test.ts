import { describe, expect, it } from 'vitest';
import type { CautionCode } from '../cautions/cautions.ts';
import type { GivenInput } from './inputs.ts';
import { derive } from './registry.ts';

const q = (value: number | number[], unit: string): GivenInput => ({ value, unit });
const codes = (quantity: string, inputs: Record<string, GivenInput>) =>
  derive(quantity, inputs).cautions.map(({ code }) => code);
const cuff = { sbp: q(120, 'mm[Hg]'), dbp: q(80, 'mm[Hg]') };
const hct = (value: number) => ({ hct: q(value, '1') });
const at = (value: number) => ({ shear_rate: q(value, '/s') });
const plasma = { plasma_viscosity: q(1.2, 'mPa.s'), plasma_temperature: q(37, 'Cel') };
const tube = (radius: number) => ({
  viscosity: q(0.0035, 'Pa.s'),
  length: q(0.1, 'm'),
  radius: q(radius, 'm'),
});

/** Each caution once where it must stand, and the nearest value where it must not. */
describe('cautions follow the value', () => {
  it.each<[CautionCode, string, Record<string, GivenInput>, Record<string, GivenInput>]>([
    ['HEART_RATE_RANGE', 'map_third', { ...cuff, hr: q(101, '/min') }, { ...cuff, hr: q(100, '/min') }],
    ['HEART_RATE_RANGE', 'map_hr_corrected', { ...cuff, hr: q(39, '/min') }, { ...cuff, hr: q(40, '/min') }],
    [
      'FORM_FACTOR_RANGE',
      'form_factor_from_map',
      { ...cuff, map: q(105, 'mm[Hg]') },
      { ...cuff, map: q(103, 'mm[Hg]') },
    ],
    [
      'FEW_READINGS',
      'fbf_mean',
      { readings: q([2, 2.1], 'mL/min/dL') },
      { readings: q([2, 2.1, 2.2], 'mL/min/dL') },
    ],
    [
      'BLOCK_VARIATION',
      'fbf_cv_percent',
      { readings: q([2, 2.4, 2.9], 'mL/min/dL') },
      { readings: q([2, 2.1, 2.2], 'mL/min/dL') },
    ],
    [
      'SHEAR_RANGE',
      'viscosity_walburn_schneck',
      { hct_percent: q(45, '%'), ...at(22) },
      { hct_percent: q(45, '%'), ...at(23) },
    ],
    [
      'HAEMATOCRIT_RANGE',
      'viscosity_walburn_schneck',
      { hct_percent: q(34, '%'), ...at(100) },
      { hct_percent: q(35, '%'), ...at(100) },
    ],
    [
      'HAEMATOCRIT_RANGE',
      'viscosity_quemada_cokelet',
      { ...hct(0.66), ...at(100), ...plasma },
      { ...hct(0.65), ...at(100), ...plasma },
    ],
    [
      'SHEAR_RANGE',
      'viscosity_quemada_cokelet',
      { ...hct(0.4), ...at(0.04), ...plasma },
      { ...hct(0.4), ...at(0.05), ...plasma },
    ],
    [
      'SMALL_VESSEL',
      'viscosity_pries_bulk_relative',
      { ...hct(0.4), diameter: q(299, 'um') },
      { ...hct(0.4), diameter: q(300, 'um') },
    ],
    [
      'TEMPERATURE_ASSUMED',
      'viscosity_quemada_das',
      { ...hct(0.4), ...at(100), plasma_viscosity: q(1.2, 'mPa.s') },
      { ...hct(0.4), ...at(100), ...plasma },
    ],
    [
      'DIAMETER_RANGE',
      'viscosity_pries_vivo_relative',
      { ...hct(0.4), diameter: q(3.9, 'um') },
      { ...hct(0.4), diameter: q(4, 'um') },
    ],
    ['TRAPPED_PLASMA', 'viscosity_pries_bulk_relative', hct(0.65), hct(0.64)],
    ['RIGID_SPHERES', 'viscosity_brinkman_relative', hct(0.31), hct(0.3)],
    [
      'TEMPERATURE_RANGE',
      'viscosity_temperature_corrected',
      { viscosity: q(1.2, 'mPa.s'), temperature_from: q(19, 'Cel'), temperature_to: q(37, 'Cel') },
      { viscosity: q(1.2, 'mPa.s'), temperature_from: q(20, 'Cel'), temperature_to: q(37, 'Cel') },
    ],
    [
      'REYNOLDS_HIGH',
      'reynolds_kinematic',
      { v_mean: q(48, 'cm/s'), diameter: q(2.5, 'cm'), kinematic_viscosity: q(0.035, 'cm2/s') },
      { v_mean: q(45, 'cm/s'), diameter: q(0.4, 'cm'), kinematic_viscosity: q(0.035, 'cm2/s') },
    ],
    [
      'WOMERSLEY',
      'womersley',
      { radius: q(2, 'mm'), hr: q(70, '/min'), viscosity: q(3.5, 'mPa.s') },
      { radius: q(0.1, 'mm'), hr: q(70, '/min'), viscosity: q(3.5, 'mPa.s') },
    ],
    [
      'ENTRANCE',
      'entrance_length',
      { reynolds: q(500, '1'), diameter: q(4, 'mm'), length: q(11, 'cm') },
      { reynolds: q(500, '1'), diameter: q(4, 'mm'), length: q(13, 'cm') },
    ],
    ['SMALL_VESSEL', 'poiseuille_resistance', tube(149e-6), tube(151e-6)],
    [
      'NEGATIVE_GRADIENT',
      'tpg',
      { mpap: q(10, 'mm[Hg]'), pawp: q(12, 'mm[Hg]') },
      { mpap: q(14, 'mm[Hg]'), pawp: q(8, 'mm[Hg]') },
    ],
    [
      'NOT_SIMULTANEOUS',
      'fvr',
      { map: q(90, 'mm[Hg]'), fbf: q(2.5, 'mL/min/dL'), minutes_apart: q(301, 's') },
      { map: q(90, 'mm[Hg]'), fbf: q(2.5, 'mL/min/dL'), minutes_apart: q(5, 'min') },
    ],
    [
      'CRITICAL_CLOSING',
      'pvr_wood',
      { mpap: q(20, 'mm[Hg]'), pawp: q(8, 'mm[Hg]'), co: q(5, 'L/min'), airway_pressure: q(15, 'cm[H2O]') },
      { mpap: q(20, 'mm[Hg]'), pawp: q(8, 'mm[Hg]'), co: q(5, 'L/min'), airway_pressure: q(5, 'cm[H2O]') },
    ],
    [
      'DUPLICATES_DIFFER',
      'hct_mean_of_duplicates',
      { a: q(42.1, '%'), b: q(42.7, '%') },
      { a: q(42.1, '%'), b: q(42.6, '%') },
    ],
    [
      'MCHC_IMPLAUSIBLE',
      'mchc',
      { hb: q(16, 'g/dL'), hct_percent: q(30, '%') },
      { hb: q(15, 'g/dL'), hct_percent: q(45, '%') },
    ],
    [
      'CALIBRATION_DRIFT',
      'fbf_from_calibrated_slope',
      {
        slope: q(1.2, 'mV/s'),
        cal_deflection: q(20, 'mV'),
        cal_percent: q(1, '%'),
        cal_deflection_after: q(21.1, 'mV'),
      },
      {
        slope: q(1.2, 'mV/s'),
        cal_deflection: q(20, 'mV'),
        cal_percent: q(1, '%'),
        cal_deflection_after: q(20.9, 'mV'),
      },
    ],
    [
      'INCOMPLETE_RECOVERY',
      'excess_flow',
      { t: q([0, 1, 2], 'min'), flow: q([30, 8, 3], 'mL/min/dL'), baseline_flow: q(2.6, 'mL/min/dL') },
      { t: q([0, 1, 2], 'min'), flow: q([30, 8, 2.8], 'mL/min/dL'), baseline_flow: q(2.6, 'mL/min/dL') },
    ],
    [
      'LATE_FIRST_FLOW',
      'excess_flow',
      { t: q([11, 60], 's'), flow: q([30, 2.6], 'mL/min/dL'), baseline_flow: q(2.6, 'mL/min/dL') },
      { t: q([10, 60], 's'), flow: q([30, 2.6], 'mL/min/dL'), baseline_flow: q(2.6, 'mL/min/dL') },
    ],
  ])('%s with %s', (code, quantity, cautioned, clean) => {
    expect(codes(quantity, cautioned)).toContain(code);
    expect(codes(quantity, clean)).not.toContain(code);
  });

  it.each<[CautionCode, string, Record<string, GivenInput>]>([
    ['AORTIC_FORMULA', 'map_aortic_chemla', cuff],
    ['ASSUMED_FLOW_FRACTION', 'regional_flow', { co: q(5, 'L/min'), fraction: q(20, '%') }],
    ['NOT_A_TARGET', 'hct_transport_index', { ...hct(0.4), relative_viscosity: q(2.8, '1') }],
    [
      'DESIMONE_VARIANT',
      'viscosity_desimone208_ungrouped',
      { hct_percent: q(45, '%'), total_protein: q(72, 'g/L') },
    ],
    ['HAEMATOCRIT_ABSENT', 'viscosity_carreau', at(100)],
    [
      'ORDER_DEPENDENT',
      'sequential_rheological_first',
      { r1: q(37, 'Pa.s'), r2: q(26, 'Pa.s'), eta1: q(3.6, 'mPa.s'), eta2: q(3.1, 'mPa.s') },
    ],
    ['PLASMA_VISCOSITY_ASSUMED', 'viscosity_quemada_cokelet', { ...hct(0.4), ...at(100) }],
    ['PROTEIN_ASSUMED', 'viscosity_walburn_schneck', { hct_percent: q(45, '%'), ...at(100) }],
    [
      'HYPERAEMIA_CONFIRMED',
      'fbf_from_percent_slope',
      { slope: q(2, '%/s'), hyperaemia_confirmed: q(1, '1') },
    ],
  ])('%s always with %s', (code, quantity, inputs) => {
    expect(codes(quantity, inputs)).toContain(code);
  });
});
