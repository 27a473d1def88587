import { describe, expect, it } from 'vitest';
import { splitFromMeasurements } from '../haemodynamics/split/split-from-measurements.ts';
import { measurementOfKnownSpread } from '../haemodynamics/split/measurement.ts';
import { viscosityLawNamed } from '../haemorheology/viscosity-laws.ts';
import type { GivenInput } from './inputs.ts';
import { derive } from './registry.ts';

const mmHg = (value: number) => ({ value, unit: 'mm[Hg]' });
const litres = (value: number) => ({ value, unit: 'L/min' });
const flow = (value: number) => ({ value, unit: 'mL/min/dL' });
const shear = (value: number) => ({ value, unit: '/s' });
const micrometres = (value: number) => ({ value, unit: 'um' });
const fraction = (value: number) => ({ value, unit: 'L/L' });
const percent = (value: number) => ({ value, unit: '%' });
const plasma = { value: 1.2, unit: 'mPa.s' };
const r = (value: number) => ({ value, unit: 'mm[Hg].min.dL/mL' });
const eta = (value: number) => ({ value, unit: 'mPa.s' });

function refusal(
  quantity: string,
  inputs: Record<string, GivenInput>,
): { argument?: string; remedy: string; message: string } {
  try {
    derive(quantity, inputs);
  } catch (error) {
    return error as { argument?: string; remedy: string; message: string };
  }
  throw new Error(`${quantity} gave a number`);
}

describe('inputs that must be refused (appendix B of the haemodynamics reference)', () => {
  it.each<[string, string, Record<string, GivenInput>, string]>([
    ['1. haematocrit 42 with unit L/L', 'viscosity_pries_bulk_relative', { hct: fraction(42) }, 'hct'],
    ['1. haematocrit 0.42 with unit %', 'viscosity_pries_bulk_relative', { hct: percent(0.42) }, 'hct'],
    ['1. haematocrit 3 with unit %', 'viscosity_lichtman', { hct_percent: percent(3) }, 'hct_percent'],
    ['1. haematocrit 3 with unit L/L', 'viscosity_lichtman', { hct_percent: fraction(3) }, 'hct_percent'],
    ['1. haematocrit 80 %', 'hct_fraction_to_percent', { hct: percent(80) }, 'hct'],
    ['2. a flow of 0', 'fvr', { map: mmHg(90), fbf: flow(0) }, 'fbf'],
    ['2. a negative cardiac output', 'svr_wood', { map: mmHg(90), cvp: mmHg(3), co: litres(-5) }, 'co'],
    [
      '2. a flow of 0 among readings',
      'fbf_mean',
      { readings: { value: [2.4, 0, 2.6], unit: 'mL/min/dL' } },
      'readings[2]',
    ],
    [
      '2. a falling volume',
      'fbf_from_percent_slope',
      { slope: { value: -0.01, unit: '%/s' } },
      'forearmBloodFlow',
    ],
    ['3. systolic at diastolic', 'map_third', { sbp: mmHg(80), dbp: mmHg(80) }, 'sbp'],
    ['3. systolic below diastolic', 'pulse_pressure', { sbp: mmHg(80), dbp: mmHg(120) }, 'sbp'],
    [
      '4. flow without calibration',
      'fbf_from_calibrated_slope',
      { slope: { value: 1.2, unit: 'mV/s' } },
      'cal_deflection',
    ],
    [
      '4. an uncalibrated signal as percent',
      'fbf_from_percent_slope',
      { slope: { value: 1.2, unit: 'mV/s' } },
      'slope',
    ],
    [
      '5. Walburn-Schneck below 30 %',
      'viscosity_walburn_schneck',
      { hct_percent: percent(29.9), shear_rate: shear(100) },
      'hct_percent',
    ],
    [
      '6. Quemada at packing',
      'viscosity_quemada_fixed',
      { hct: fraction(0.6), shear_rate: shear(0.1), plasma_viscosity: plasma },
      'hct',
    ],
    [
      '7. Pries in vivo at 2 um',
      'viscosity_pries_vivo_relative',
      { hct: fraction(0.45), diameter: micrometres(2) },
      'diameter',
    ],
    [
      '7. a bulk law below 10 um',
      'viscosity_quemada_cokelet',
      { hct: fraction(0.45), shear_rate: shear(100), plasma_viscosity: plasma, diameter: micrometres(9.9) },
      'diameter',
    ],
    [
      '8. Casson at rest',
      'viscosity_casson',
      {
        yield_stress: { value: 0.004, unit: 'Pa' },
        casson_viscosity: { value: 0.0035, unit: 'Pa.s' },
        shear_rate: shear(0),
      },
      'shear_rate',
    ],
    [
      '9. a viscosity without its temperature',
      'viscosity_temperature_corrected',
      { viscosity: plasma, temperature_to: { value: 37, unit: 'Cel' } },
      'temperature_from',
    ],
    [
      '10. a share where nothing changed',
      'share_rheological',
      { r1: r(40), r2: r(40), eta1: eta(3.9), eta2: eta(3.3) },
      'r2',
    ],
    [
      '10. a share of opposing parts',
      'share_vasomotor',
      { r1: r(40), r2: r(41), eta1: eta(3.9), eta2: eta(3.3) },
      'r2',
    ],
    [
      '11. plasma volume across blood loss',
      'dill_costill_pv_change',
      {
        hb_before: { value: 15, unit: 'g/dL' },
        hb_after: { value: 14, unit: 'g/dL' },
        hct_before: fraction(0.45),
        hct_after: fraction(0.42),
        blood_loss: { value: 450, unit: 'mL' },
      },
      'blood_loss',
    ],
    [
      '11. blood volume across a transfusion',
      'dill_costill_bv',
      {
        hb_before: { value: 12, unit: 'g/dL' },
        hb_after: { value: 14, unit: 'g/dL' },
        transfusion: { value: 0.3, unit: 'L' },
      },
      'transfusion',
    ],
    ['12. a forearm resistance as Wood units', 'wood_to_dyn', { r: r(36) }, 'r'],
    [
      '13. pulmonary resistance without a gradient',
      'pvr_wood',
      { mpap: mmHg(10), pawp: mmHg(10), co: litres(5) },
      'mpap',
    ],
    [
      '14. a paired test of two',
      'paired_log_t',
      { before: { value: [1, 2], unit: '1' }, after: { value: [2, 3], unit: '1' } },
      'before',
    ],
    ['15. the logarithm of 0', 'log_change', { x1: r(40), x2: r(0) }, 'x2'],
    [
      '15. the logarithm of a negative value',
      'geometric_mean_ratio',
      { before: { value: [1, -2], unit: '1' }, after: { value: [2, 3], unit: '1' } },
      'before[2]',
    ],
    ['17. systemic resistance without venous pressure', 'svr_wood', { map: mmHg(90), co: litres(5) }, 'cvp'],
    [
      '18. a saturation above 1',
      'oxygen_content_mmhg',
      {
        hb: { value: 15, unit: 'g/dL' },
        sat: { value: 1.01, unit: '1' },
        po2: mmHg(95),
        hufner: { value: 1.34, unit: 'mL/g' },
      },
      'sat',
    ],
    [
      '18. a saturation of 0.98 %',
      'oxygen_content_mmhg',
      {
        hb: { value: 15, unit: 'g/dL' },
        sat: percent(0.98),
        po2: mmHg(95),
        hufner: { value: 1.34, unit: 'mL/g' },
      },
      'sat',
    ],
    ['a haemoglobin of 150 g/dL', 'hct_from_hb_rule', { hb: { value: 150, unit: 'g/dL' } }, 'hb'],
    [
      'a solubility per mmHg taken for one per kPa',
      'oxygen_content_kpa',
      {
        hb: { value: 15, unit: 'g/dL' },
        sat: fraction(1),
        po2: { value: 13, unit: 'kPa' },
        hufner: { value: 1.34, unit: 'mL/g' },
        solubility: { value: 0.003, unit: 'mL/dL/kPa' },
      },
      'solubility',
    ],
    [
      'turbulent flow in a Poiseuille tube',
      'poiseuille_dp',
      {
        flow: { value: 0.0005, unit: 'm3/s' },
        viscosity: { value: 0.0035, unit: 'Pa.s' },
        length: { value: 1, unit: 'm' },
        radius: { value: 0.01, unit: 'm' },
      },
      'reynolds',
    ],
  ])('%s', (_, quantity, inputs, argument) => {
    const { argument: named, remedy, message } = refusal(quantity, inputs);
    expect(named).toBe(argument);
    expect(remedy.length).toBeGreaterThan(10);
    expect(message.length).toBeGreaterThan(10);
  });

  it('16. Carreau laws in the split', () => {
    expect(() => viscosityLawNamed('carreau')).toThrow(/forbidden in the split/);
    expect(() => viscosityLawNamed('carreau-yasuda')).toThrow(/forbidden in the split/);
  });

  it('9. a split with a plasma viscosity of unknown temperature', () => {
    const condition = {
      meanPressure: measurementOfKnownSpread('meanPressure', 90, 2),
      flow: measurementOfKnownSpread('flow', 2.5, 0.2),
      haematocrit: measurementOfKnownSpread('haematocrit', 0.42, 0.004),
      plasmaViscosity: { ...measurementOfKnownSpread('plasmaViscosity', 1.2, 0), temperature: undefined },
    };
    expect(() =>
      splitFromMeasurements(condition, condition, { law: 'pries-bulk' }, { tQuantile: () => 2 }),
    ).toThrow(/plasmaViscosity.temperature/);
  });

  it('offers total peripheral resistance where venous pressure is missing', () => {
    expect(refusal('svr_dyn', { map: mmHg(90), co: litres(5) }).remedy).toContain('tpr_wood');
  });

  it('says in the words of a share why there is none', () => {
    const { message, remedy } = refusal('share_rheological', {
      r1: r(40),
      r2: r(30),
      eta1: eta(3.3),
      eta2: eta(3.9),
    });
    expect(message).toContain('viscosity moved against the resistance');
    expect(remedy).toContain('opposing or negligible change: shares not meaningful');
  });
});
