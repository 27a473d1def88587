import { forearmVascularConductance } from '../haemodynamics/resistance/forearm-vascular-conductance.ts';
import { forearmVascularResistanceVariation } from '../haemodynamics/resistance/forearm-vascular-resistance-variation.ts';
import { forearmVascularResistance } from '../haemodynamics/resistance/forearm-vascular-resistance.ts';
import { pulmonaryVascularResistance } from '../haemodynamics/resistance/pulmonary-vascular-resistance.ts';
import { regionalBloodFlow } from '../haemodynamics/resistance/regional-blood-flow.ts';
import { resistanceInParallel } from '../haemodynamics/resistance/resistance-in-parallel.ts';
import { resistanceInSeries } from '../haemodynamics/resistance/resistance-in-series.ts';
import { resistanceStandardDeviation } from '../haemodynamics/resistance/resistance-standard-deviation.ts';
import { systemicVascularResistanceIndex } from '../haemodynamics/resistance/systemic-vascular-resistance-index.ts';
import { systemicVascularResistance } from '../haemodynamics/resistance/systemic-vascular-resistance.ts';
import { totalPeripheralResistance } from '../haemodynamics/resistance/total-peripheral-resistance.ts';
import { totalPulmonaryResistance } from '../haemodynamics/resistance/total-pulmonary-resistance.ts';
import { transpulmonaryGradient } from '../haemodynamics/resistance/transpulmonary-gradient.ts';
import {
  cardiacOutputInput,
  centralVenousPressure,
  forearmBloodFlow,
  meanArterialPressure,
  meanPulmonaryArterialPressure,
  minutesApart,
  pulmonaryArteryWedgePressure,
  timingCautions,
} from './common-inputs.ts';
import { define } from './define.ts';
import { defaulted, kept, many, optional, sameUnit, single } from './inputs.ts';
import { convert, sameDimension } from '../units/convert.ts';
import { quantity } from '../units/quantity.ts';

const wood = "[wood'U]";
const dyn = 'dyn.s/cm5';
const forearm = { map: meanArterialPressure, fbf: forearmBloodFlow, minutes_apart: minutesApart };
const systemic = {
  map: meanArterialPressure,
  cvp: centralVenousPressure,
  co: cardiacOutputInput,
  minutes_apart: minutesApart,
};
const pulmonary = {
  mpap: meanPulmonaryArterialPressure,
  pawp: pulmonaryArteryWedgePressure,
  co: cardiacOutputInput,
  airway_pressure: optional('mm[Hg]', 'airwayPressure', 'mean airway pressure, when ventilated', 'finite'),
};
const closing = (given: { readonly airway_pressure: number | undefined; readonly pawp: number }) =>
  given.airway_pressure !== undefined && given.airway_pressure > given.pawp && ('CRITICAL_CLOSING' as const);
const resistances = kept(many(wood, 'resistances', 'resistances of the beds', 'each above 0'), wood, 'Pa.s');

/** Resistance and conductance of forearm, systemic and pulmonary beds, and of networks. */
export const resistanceQuantities = [
  define({
    key: 'fvr',
    name: 'forearmVascularResistance',
    title: 'Forearm vascular resistance',
    inputs: forearm,
    unit: 'mm[Hg].min.dL/mL',
    formula: 'map / fbf',
    source: 'convention of the field; Wilkinson & Webb 2001',
    compute: ({ map, fbf }) => forearmVascularResistance(map, fbf),
    cautions: (given) => ['VENOUS_PRESSURE_NEGLECTED', timingCautions(given)],
  }),
  define({
    key: 'fvc',
    name: 'forearmVascularConductance',
    title: 'Forearm vascular conductance',
    inputs: forearm,
    unit: 'mL/min/dL/mm[Hg]',
    formula: 'fbf / map',
    source: 'Lautt 1989, Microvasc Res 37:230 (journal from memory)',
    compute: ({ map, fbf }) => forearmVascularConductance(map, fbf),
    cautions: (given) => ['VENOUS_PRESSURE_NEGLECTED', timingCautions(given)],
  }),
  define({
    key: 'svr_wood',
    name: 'systemicVascularResistance',
    title: 'Systemic vascular resistance, Wood units',
    inputs: systemic,
    unit: wood,
    formula: '(map - cvp) / co',
    source: 'textbook',
    compute: ({ map, cvp, co }) => systemicVascularResistance(map, cvp, co),
    cautions: (given) => [timingCautions(given)],
  }),
  define({
    key: 'svr_dyn',
    name: 'systemicVascularResistanceDyn',
    title: 'Systemic vascular resistance, dyn.s/cm5',
    inputs: systemic,
    unit: dyn,
    formula: '79.993432449 * (map - cvp) / co',
    source: 'textbook; exact factor by algebra',
    compute: ({ map, cvp, co }) => convert(systemicVascularResistance(map, cvp, co), wood, dyn),
    cautions: (given) => [timingCautions(given)],
  }),
  define({
    key: 'svri_dyn',
    name: 'systemicVascularResistanceIndex',
    title: 'Systemic vascular resistance index',
    inputs: {
      map: meanArterialPressure,
      cvp: centralVenousPressure,
      ci: single('L/min/m2', 'cardiacIndex', 'cardiac index', 'above 0'),
      minutes_apart: minutesApart,
    },
    unit: 'dyn.s.m2/cm5',
    formula: '79.993432449 * (map - cvp) / ci',
    source: 'textbook; resistance is multiplied by body surface area',
    compute: ({ map, cvp, ci }) =>
      convert(systemicVascularResistanceIndex(map, cvp, ci), "[wood'U].m2", 'dyn.s.m2/cm5'),
    cautions: (given) => [timingCautions(given)],
  }),
  define({
    key: 'tpr_wood',
    name: 'totalPeripheralResistance',
    title: 'Total peripheral resistance, Wood units',
    inputs: { map: meanArterialPressure, co: cardiacOutputInput, minutes_apart: minutesApart },
    unit: wood,
    formula: 'map / co',
    source: 'textbook',
    compute: ({ map, co }) => totalPeripheralResistance(map, co),
    cautions: (given) => ['VENOUS_PRESSURE_NEGLECTED', timingCautions(given)],
  }),
  define({
    key: 'pvr_wood',
    name: 'pulmonaryVascularResistance',
    title: 'Pulmonary vascular resistance, Wood units',
    inputs: pulmonary,
    unit: wood,
    formula: '(mpap - pawp) / co',
    source: 'textbook',
    compute: ({ mpap, pawp, co }) => pulmonaryVascularResistance(mpap, pawp, co),
    cautions: (given) => [closing(given)],
  }),
  define({
    key: 'pvr_dyn',
    name: 'pulmonaryVascularResistanceDyn',
    title: 'Pulmonary vascular resistance, dyn.s/cm5',
    inputs: pulmonary,
    unit: dyn,
    formula: '79.993432449 * (mpap - pawp) / co',
    source: 'textbook; exact factor by algebra',
    compute: ({ mpap, pawp, co }) => convert(pulmonaryVascularResistance(mpap, pawp, co), wood, dyn),
    cautions: (given) => [closing(given)],
  }),
  define({
    key: 'total_pulmonary_resistance_wood',
    name: 'totalPulmonaryResistance',
    title: 'Total pulmonary resistance, Wood units',
    inputs: {
      mpap: single('mm[Hg]', 'meanPulmonaryArterialPressure', 'mean pulmonary arterial pressure', 'above 0'),
      co: cardiacOutputInput,
    },
    unit: wood,
    formula: 'mpap / co',
    source: 'textbook',
    compute: ({ mpap, co }) => totalPulmonaryResistance(mpap, co),
  }),
  define({
    key: 'tpg',
    name: 'transpulmonaryGradient',
    title: 'Transpulmonary gradient',
    inputs: { mpap: meanPulmonaryArterialPressure, pawp: pulmonaryArteryWedgePressure },
    unit: 'mm[Hg]',
    formula: 'mpap - pawp',
    source: 'definition',
    compute: ({ mpap, pawp }) => transpulmonaryGradient(mpap, pawp),
    cautions: (_, gradient) => [gradient <= 0 && 'NEGATIVE_GRADIENT'],
  }),
  define({
    key: 'resistance_series',
    name: 'resistanceInSeries',
    title: 'Resistance of beds in series',
    inputs: { r: resistances },
    unit: ({ r }) => r,
    formula: 'sum(r)',
    source: 'textbook',
    compute: ({ r }) => resistanceInSeries(r),
  }),
  define({
    key: 'resistance_parallel',
    name: 'resistanceInParallel',
    title: 'Resistance of beds in parallel',
    inputs: { r: resistances },
    unit: ({ r }) => r,
    formula: '1 / sum(1 / r)',
    source: 'textbook',
    compute: ({ r }) => resistanceInParallel(r),
  }),
  define({
    key: 'resistance_sd',
    name: 'resistanceStandardDeviation',
    title: 'Standard deviation of a resistance',
    inputs: {
      dp: single('mm[Hg]', 'pressureDifference', 'driving pressure', 'above 0'),
      sd_p1: single('mm[Hg]', 'upstreamDeviation', 'SD of the upstream pressure', 'at least 0'),
      sd_p2: defaulted(
        single('mm[Hg]', 'downstreamDeviation', 'SD of the downstream pressure', 'at least 0'),
        0,
      ),
      flow: kept(single('L/min', 'flow', 'flow', 'above 0'), 'L/min', 'mL/min/dL'),
      sd_flow: sameUnit(single('L/min', 'flowDeviation', 'SD of the flow', 'at least 0'), 'flow'),
    },
    unit: ({ flow }) => (sameDimension(flow, 'L/min') ? wood : 'mm[Hg].min.dL/mL'),
    unitAbout: `${wood}, or mm[Hg].min.dL/mL for a flow per volume of tissue`,
    formula: 'dp / flow * sqrt((sd_p1^2 + sd_p2^2) / dp^2 + (sd_flow / flow)^2)',
    source: 'propagation of errors, first order',
    compute: ({ dp, sd_p1, sd_p2, flow, sd_flow }, units) => {
      const to = sameDimension(units.flow, 'L/min') ? 'L/min' : 'mL/min/dL';
      const converted = (value: number, unit: string) => convert(value, unit, to);
      return quantity(
        resistanceStandardDeviation(
          dp,
          sd_p1,
          sd_p2,
          converted(flow, units.flow),
          converted(sd_flow, units.flow),
        ),
      );
    },
  }),
  define({
    key: 'fvr_cv',
    name: 'forearmVascularResistanceVariation',
    title: 'Coefficient of variation of forearm vascular resistance',
    inputs: {
      map: meanArterialPressure,
      sd_map: single('mm[Hg]', 'pressureDeviation', 'SD of mean arterial pressure', 'at least 0'),
      fbf: forearmBloodFlow,
      sd_fbf: single('mL/min/dL', 'flowDeviation', 'SD of forearm blood flow', 'at least 0'),
      correlation: defaulted(
        single('1', 'correlation', 'correlation of pressure and flow errors', '-1 to 1'),
        0,
      ),
    },
    unit: '1',
    formula: 'sqrt((sd_map/map)^2 + (sd_fbf/fbf)^2 - 2 * correlation * (sd_map/map) * (sd_fbf/fbf))',
    source: 'propagation of errors, first order',
    compute: (g) => forearmVascularResistanceVariation(g.map, g.sd_map, g.fbf, g.sd_fbf, g.correlation),
  }),
  define({
    key: 'regional_flow',
    name: 'regionalBloodFlow',
    title: 'Regional blood flow from an assumed fraction of cardiac output',
    inputs: {
      co: cardiacOutputInput,
      fraction: single('1', 'flowFraction', 'assumed fraction of cardiac output', 'above 0, at most 1'),
    },
    unit: 'L/min',
    formula: 'fraction * co',
    source: 'common practice',
    compute: ({ co, fraction }) => regionalBloodFlow(co, fraction),
    cautions: () => ['ASSUMED_FLOW_FRACTION'],
  }),
  define({
    key: 'regional_resistance_wood',
    name: 'regionalVascularResistance',
    title: 'Regional vascular resistance from an assumed fraction of cardiac output',
    inputs: {
      ...systemic,
      fraction: single('1', 'flowFraction', 'assumed fraction of cardiac output', 'above 0, at most 1'),
    },
    unit: wood,
    formula: '(map - cvp) / (fraction * co)',
    source: 'common practice',
    compute: ({ map, cvp, co, fraction }) =>
      systemicVascularResistance(map, cvp, regionalBloodFlow(co, fraction)),
    cautions: (given) => ['ASSUMED_FLOW_FRACTION', timingCautions(given)],
  }),
  ...(
    [
      ['wood_to_dyn', 'resistanceFromWoodToDyn', wood, dyn],
      ['dyn_to_wood', 'resistanceFromDynToWood', dyn, wood],
      ['wood_to_si', 'resistanceFromWoodToSi', wood, 'Pa.s/m3'],
      ['si_to_wood', 'resistanceFromSiToWood', 'Pa.s/m3', wood],
    ] as const
  ).map(([key, name, from, to]) =>
    define({
      key,
      name,
      title: `Resistance from ${from} to ${to}`,
      inputs: { r: single(from, 'resistance', 'resistance', 'finite') },
      unit: to,
      formula: "1 [wood'U] = 79.993432449 dyn.s/cm5 = 7999343.2449 Pa.s/m3",
      source: 'SI definitions and 133.322387415 Pa; UCUM 79.9932',
      compute: ({ r }) => convert(r, from, to),
    }),
  ),
  define({
    key: 'fvr_to_si',
    name: 'forearmVascularResistanceInSi',
    title: 'Forearm vascular resistance in SI units',
    inputs: {
      fvr: single('mm[Hg].min.dL/mL', 'forearmVascularResistance', 'forearm vascular resistance', 'finite'),
    },
    unit: 'Pa.s',
    formula: 'fvr * 133.322387415 * 6000',
    source: 'SI definitions; the tissue volume cancels',
    compute: ({ fvr }) => convert(fvr, 'mm[Hg].min.dL/mL', 'Pa.s'),
  }),
];
