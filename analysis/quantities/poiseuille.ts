import { entranceLength } from '../haemodynamics/poiseuille/entrance-length.ts';
import { flowRatioFromRadiusRatio } from '../haemodynamics/poiseuille/flow-ratio-from-radius-ratio.ts';
import { hindrance } from '../haemodynamics/poiseuille/hindrance.ts';
import { laminarFlow } from '../haemodynamics/poiseuille/laminar-flow.ts';
import { parabolicVelocity } from '../haemodynamics/poiseuille/parabolic-velocity.ts';
import { poiseuilleFlow } from '../haemodynamics/poiseuille/poiseuille-flow.ts';
import { poiseuillePressureDropFromVelocity } from '../haemodynamics/poiseuille/poiseuille-pressure-drop-from-velocity.ts';
import { poiseuillePressureDrop } from '../haemodynamics/poiseuille/poiseuille-pressure-drop.ts';
import { poiseuilleRadius } from '../haemodynamics/poiseuille/poiseuille-radius.ts';
import { poiseuilleResistance } from '../haemodynamics/poiseuille/poiseuille-resistance.ts';
import { radiusRatioFromFlowAndPressure } from '../haemodynamics/poiseuille/radius-ratio-from-flow-and-pressure.ts';
import { radiusRatioFromHindrance } from '../haemodynamics/poiseuille/radius-ratio-from-hindrance.ts';
import { reynoldsNumberKinematic } from '../haemodynamics/poiseuille/reynolds-number-kinematic.ts';
import { reynoldsNumber } from '../haemodynamics/poiseuille/reynolds-number.ts';
import { wallShearRateFromFlow } from '../haemodynamics/poiseuille/wall-shear-rate-from-flow.ts';
import { wallShearRate } from '../haemodynamics/poiseuille/wall-shear-rate.ts';
import { wallShearStressFromPressureDrop } from '../haemodynamics/poiseuille/wall-shear-stress-from-pressure-drop.ts';
import { wallShearStress } from '../haemodynamics/poiseuille/wall-shear-stress.ts';
import { womersleyNumber } from '../haemodynamics/poiseuille/womersley-number.ts';
import { bloodDensity } from '../haemodynamics/pressure/hydrostatic-pressure.ts';
import type { CautionCodes } from '../haemorheology/ranges.ts';
import {
  density,
  heartRate,
  length,
  pressureDifference,
  radius,
  viscosity,
  volumeFlow,
} from './common-inputs.ts';
import { define } from './define.ts';
import { defaulted, kept, optional, sameUnit, single } from './inputs.ts';
import { convert, sameDimension } from '../units/convert.ts';
import { quantity } from '../units/quantity.ts';
import type { Quantity } from '../units/quantity.ts';

const tube = { viscosity, length, radius };
const bloodDensityInput = defaulted(density, bloodDensity);

/** Cautions of a flow through a tube, and the refusal of a turbulent one. */
function tubeCautions(
  flow: Quantity<'m3/s'>,
  given: {
    readonly viscosity: Quantity<'Pa.s'>;
    readonly length: number;
    readonly radius: Quantity<'m'>;
    readonly density: Quantity<'kg/m3'>;
  },
): CautionCodes {
  const { reynolds, entrance } = laminarFlow(flow, given.viscosity, given.radius, given.density);
  return [
    reynolds > 2000 && 'REYNOLDS_HIGH',
    given.length < entrance && 'ENTRANCE',
    2 * given.radius < 300e-6 && 'SMALL_VESSEL',
    wallShearRateFromFlow(flow, given.radius) < 100 && 'SHEAR_RANGE',
  ];
}

/** Poiseuille's law, its inverse, the hindrance, and the numbers that say whether the law holds. */
export const poiseuilleQuantities = [
  define({
    key: 'poiseuille_resistance',
    name: 'poiseuilleResistance',
    title: 'Resistance of a straight tube',
    inputs: tube,
    unit: 'Pa.s/m3',
    formula: '8 * viscosity * length / (pi * radius^4)',
    source: 'Hagen-Poiseuille; Sutera & Skalak 1993, Annu Rev Fluid Mech 25:1',
    compute: (g) => poiseuilleResistance(g.viscosity, g.length, g.radius),
    cautions: (g) => [2 * g.radius < 300e-6 && 'SMALL_VESSEL'],
  }),
  define({
    key: 'poiseuille_flow',
    name: 'poiseuilleFlow',
    title: 'Flow through a straight tube',
    inputs: { dp: pressureDifference, ...tube, density: bloodDensityInput },
    unit: 'm3/s',
    formula: 'dp * pi * radius^4 / (8 * viscosity * length)',
    source: 'Hagen-Poiseuille',
    compute: (g) => poiseuilleFlow(g.dp, g.viscosity, g.length, g.radius),
    cautions: (g, flow) => tubeCautions(quantity(flow), g),
  }),
  define({
    key: 'poiseuille_dp',
    name: 'poiseuillePressureDrop',
    title: 'Pressure drop along a straight tube from volume flow',
    inputs: { flow: volumeFlow, ...tube, density: bloodDensityInput },
    unit: 'Pa',
    formula: 'flow * 8 * viscosity * length / (pi * radius^4)',
    source: 'Hagen-Poiseuille',
    compute: (g) => poiseuillePressureDrop(g.flow, g.viscosity, g.length, g.radius),
    cautions: (g) => tubeCautions(g.flow, g),
  }),
  define({
    key: 'poiseuille_dp_from_velocity',
    name: 'poiseuillePressureDropFromVelocity',
    title: 'Pressure drop along a straight tube from mean velocity',
    inputs: {
      ...tube,
      v_mean: single('m/s', 'meanVelocity', 'velocity, mean over the cross-section', 'above 0'),
      density: bloodDensityInput,
    },
    unit: 'Pa',
    formula: '8 * viscosity * length * v_mean / radius^2',
    source: 'Hagen-Poiseuille',
    compute: (g) => poiseuillePressureDropFromVelocity(g.viscosity, g.length, g.v_mean, g.radius),
    cautions: (g) => tubeCautions(quantity(g.v_mean * Math.PI * g.radius ** 2), g),
  }),
  define({
    key: 'poiseuille_radius',
    name: 'poiseuilleRadius',
    title: 'Radius of the equivalent single tube',
    inputs: { resistance: single('Pa.s/m3', 'resistance', 'resistance', 'above 0'), viscosity, length },
    unit: 'm',
    formula: '(8 * viscosity * length / (pi * resistance))^(1/4)',
    source: 'Hagen-Poiseuille solved for the radius',
    compute: (g) => poiseuilleRadius(g.resistance, g.viscosity, g.length),
    cautions: () => ['EQUIVALENT_RADIUS'],
  }),
  define({
    key: 'hindrance',
    name: 'vascularHindrance',
    title: 'Vascular hindrance: resistance with viscosity divided out',
    inputs: {
      resistance: kept(single('Pa.s/m3', 'resistance', 'resistance', 'at least 0'), 'Pa.s/m3', 'Pa.s'),
      viscosity,
    },
    unit: ({ resistance }) => (sameDimension(resistance, 'Pa.s') ? '1' : 'm-3'),
    unitAbout: 'm-3, or 1 for a resistance per volume of tissue',
    formula: 'resistance / viscosity',
    source: "Sutera & Skalak 1993, Annu Rev Fluid Mech 25:1; Lamport's concept (from memory)",
    compute: (g, units): Quantity<string> => {
      const tissue = sameDimension(units.resistance, 'Pa.s');
      return tissue
        ? hindrance<'Pa.s'>(convert(g.resistance, units.resistance, 'Pa.s'), g.viscosity)
        : hindrance<'Pa.s/m3'>(convert(g.resistance, units.resistance, 'Pa.s/m3'), g.viscosity);
    },
  }),
  define({
    key: 'forearm_hindrance',
    name: 'forearmVascularHindrance',
    title: 'Forearm vascular hindrance',
    inputs: {
      fvr: single('mm[Hg].min.dL/mL', 'resistance', 'forearm vascular resistance', 'at least 0'),
      viscosity: single('mPa.s', 'viscosity', 'viscosity of blood', 'above 0'),
    },
    unit: '1',
    formula: 'fvr * 799934.32449 Pa.s / viscosity',
    source: 'R = eta Z; the tissue volume cancels',
    compute: (g) =>
      hindrance<'Pa.s'>(convert(g.fvr, 'mm[Hg].min.dL/mL', 'Pa.s'), convert(g.viscosity, 'mPa.s', 'Pa.s')),
  }),
  define({
    key: 'radius_ratio_from_hindrance',
    name: 'radiusRatioFromHindrance',
    title: 'Ratio of equivalent radii from two hindrances',
    inputs: {
      z1: kept(single('1', 'hindrance1', 'hindrance before', 'above 0')),
      z2: sameUnit(single('1', 'hindrance2', 'hindrance after', 'above 0'), 'z1'),
    },
    unit: '1',
    formula: '(z1 / z2)^(1/4)',
    source: 'Hagen-Poiseuille',
    compute: ({ z1, z2 }) => radiusRatioFromHindrance(z1, z2),
    cautions: () => ['EQUIVALENT_RADIUS'],
  }),
  define({
    key: 'radius_ratio_from_flow_and_pressure',
    name: 'radiusRatioFromFlowAndPressure',
    title: 'Ratio of equivalent radii from ratios of flow, pressure and viscosity',
    inputs: {
      flow_ratio: single('1', 'flowRatio', 'flow after over before', 'above 0'),
      dp_ratio: single('1', 'pressureRatio', 'driving pressure after over before', 'above 0'),
      viscosity_ratio: single('1', 'viscosityRatio', 'viscosity after over before', 'above 0'),
    },
    unit: '1',
    formula: '(flow_ratio * viscosity_ratio / dp_ratio)^(1/4)',
    source: 'Hagen-Poiseuille solved for the radius',
    compute: (g) => radiusRatioFromFlowAndPressure(g.flow_ratio, g.dp_ratio, g.viscosity_ratio),
    cautions: () => ['EQUIVALENT_RADIUS'],
  }),
  define({
    key: 'flow_ratio_from_radius_ratio',
    name: 'flowRatioFromRadiusRatio',
    title: 'Ratio of flows from the ratio of radii',
    inputs: { radius_ratio: single('1', 'radiusRatio', 'radius after over before', 'above 0') },
    unit: '1',
    formula: 'radius_ratio^4',
    source: 'Hagen-Poiseuille',
    compute: (g) => flowRatioFromRadiusRatio(g.radius_ratio),
  }),
  define({
    key: 'reynolds',
    name: 'reynoldsNumber',
    title: 'Reynolds number',
    inputs: {
      density: bloodDensityInput,
      v_mean: single('m/s', 'meanVelocity', 'mean velocity', 'above 0'),
      diameter: single('m', 'diameter', 'diameter', 'above 0'),
      viscosity,
    },
    unit: '1',
    formula: 'density * v_mean * diameter / viscosity',
    source: 'textbook',
    compute: (g) => reynoldsNumber(g.density, g.v_mean, g.diameter, g.viscosity),
    cautions: (_, reynolds) => [reynolds > 2000 && 'REYNOLDS_HIGH'],
  }),
  define({
    key: 'reynolds_kinematic',
    name: 'reynoldsNumberKinematic',
    title: 'Reynolds number from kinematic viscosity',
    inputs: {
      v_mean: single('cm/s', 'meanVelocity', 'mean velocity', 'above 0'),
      diameter: single('cm', 'diameter', 'diameter', 'above 0'),
      kinematic_viscosity: single('cm2/s', 'kinematicViscosity', 'kinematic viscosity', 'above 0'),
    },
    unit: '1',
    formula: 'v_mean * diameter / kinematic_viscosity',
    source: 'textbook',
    compute: (g) => reynoldsNumberKinematic(g.v_mean, g.diameter, g.kinematic_viscosity),
    cautions: (_, reynolds) => [reynolds > 2000 && 'REYNOLDS_HIGH'],
  }),
  define({
    key: 'womersley',
    name: 'womersleyNumber',
    title: 'Womersley number',
    inputs: { radius, hr: heartRate, density: bloodDensityInput, viscosity },
    unit: '1',
    formula: 'radius * sqrt(2 * pi * hr / 60 * density / viscosity)',
    source: 'textbook',
    compute: (g) => womersleyNumber(g.radius, g.hr, g.density, g.viscosity),
    cautions: (_, alpha) => [alpha > 1 && 'WOMERSLEY'],
  }),
  define({
    key: 'entrance_length',
    name: 'entranceLength',
    title: 'Entrance length of laminar flow',
    inputs: {
      reynolds: single('1', 'reynolds', 'Reynolds number', 'above 0, at most 4000'),
      diameter: single('m', 'diameter', 'diameter', 'above 0'),
      length: optional('m', 'length', 'length of the vessel', 'above 0'),
    },
    unit: 'm',
    formula: '0.06 * reynolds * diameter',
    source: 'common engineering estimate',
    compute: (g) => entranceLength(g.reynolds, g.diameter),
    cautions: (g, needed) => [
      g.reynolds > 2000 && 'REYNOLDS_HIGH',
      g.length !== undefined && g.length < needed && 'ENTRANCE',
    ],
  }),
  define({
    key: 'wall_shear_rate',
    name: 'wallShearRate',
    title: 'Wall shear rate from mean velocity',
    inputs: {
      v_mean: single('cm/s', 'meanVelocity', 'mean velocity', 'finite'),
      diameter: single('cm', 'diameter', 'diameter', 'above 0'),
    },
    unit: '/s',
    formula: '8 * v_mean / diameter',
    source: 'Poiseuille',
    compute: (g) => wallShearRate(g.v_mean, g.diameter),
  }),
  define({
    key: 'wall_shear_rate_from_flow',
    name: 'wallShearRateFromFlow',
    title: 'Wall shear rate from volume flow',
    inputs: { flow: volumeFlow, radius },
    unit: '/s',
    formula: '4 * flow / (pi * radius^3)',
    source: 'Poiseuille',
    compute: (g) => wallShearRateFromFlow(g.flow, g.radius),
  }),
  define({
    key: 'wall_shear_stress',
    name: 'wallShearStress',
    title: 'Wall shear stress from viscosity and shear rate',
    inputs: { viscosity, shear_rate: single('/s', 'shearRate', 'shear rate', 'finite') },
    unit: 'Pa',
    formula: 'viscosity * shear_rate',
    source: 'definition of viscosity',
    compute: (g) => wallShearStress(g.viscosity, g.shear_rate),
    cautions: (g) => [Math.abs(g.shear_rate) < 100 && 'SHEAR_RANGE'],
  }),
  define({
    key: 'wall_shear_stress_from_dp',
    name: 'wallShearStressFromPressureDrop',
    title: 'Wall shear stress from the pressure drop',
    inputs: { dp: pressureDifference, radius, length },
    unit: 'Pa',
    formula: 'dp * radius / (2 * length)',
    source: 'balance of forces',
    compute: (g) => wallShearStressFromPressureDrop(g.dp, g.radius, g.length),
  }),
  define({
    key: 'parabolic_velocity',
    name: 'parabolicVelocity',
    title: 'Velocity at a distance from the axis',
    inputs: {
      dp: pressureDifference,
      ...tube,
      r: single('m', 'distanceFromAxis', 'distance from the axis', '0 to the radius'),
      density: bloodDensityInput,
    },
    unit: 'm/s',
    formula: 'dp * (radius^2 - r^2) / (4 * viscosity * length)',
    source: 'Hagen-Poiseuille',
    compute: (g) => parabolicVelocity(g.dp, g.viscosity, g.length, g.radius, g.r),
    cautions: (g) => tubeCautions(poiseuilleFlow(g.dp, g.viscosity, g.length, g.radius), g),
  }),
];
