import { debtRepayment } from '../haemodynamics/hyperaemia/debt-repayment.ts';
import { excessFlow } from '../haemodynamics/hyperaemia/excess-flow.ts';
import { flowDebt } from '../haemodynamics/hyperaemia/flow-debt.ts';
import { sigmoidResponse } from '../haemodynamics/hyperaemia/sigmoid-response.ts';
import { targetForce } from '../haemodynamics/hyperaemia/target-force.ts';
import { forearmVascularResistance } from '../haemodynamics/resistance/forearm-vascular-resistance.ts';
import { meanArterialPressure } from './common-inputs.ts';
import { define } from './define.ts';
import { kept, many, sameUnit, single } from './inputs.ts';

const baselineFlow = single('mL/min/dL', 'baselineFlow', 'baseline flow', 'above 0');

/** Reactive hyperaemia, dose-response and handgrip. */
export const hyperaemiaQuantities = [
  define({
    key: 'minimal_vascular_resistance',
    name: 'minimalVascularResistance',
    title: 'Minimal forearm vascular resistance, at peak flow',
    inputs: {
      map: meanArterialPressure,
      peak_flow: single('mL/min/dL', 'forearmBloodFlow', 'peak flow within 15 s of release', 'above 0'),
    },
    unit: 'mm[Hg].min.dL/mL',
    formula: 'map / peak_flow',
    source: 'definition; depends on temperature (Clin Physiol 1986;6:337)',
    compute: ({ map, peak_flow }) => forearmVascularResistance(map, peak_flow),
    cautions: () => ['VENOUS_PRESSURE_NEGLECTED'],
  }),
  define({
    key: 'flow_debt',
    name: 'flowDebt',
    title: 'Flow debt of an occlusion',
    inputs: {
      baseline_flow: baselineFlow,
      occlusion_minutes: single('min', 'occlusion', 'time of occlusion', 'above 0'),
    },
    unit: 'mL/dL',
    formula: 'baseline_flow * occlusion_minutes',
    source: 'definition',
    compute: (g) => flowDebt(g.baseline_flow, g.occlusion_minutes),
  }),
  define({
    key: 'excess_flow',
    name: 'excessFlow',
    title: 'Excess flow after an occlusion',
    inputs: {
      t: many('min', 't', 'times from release', 'strictly rising, at least 2'),
      flow: many('mL/min/dL', 'flows', 'flows', 'each above 0'),
      baseline_flow: baselineFlow,
    },
    unit: 'mL/dL',
    formula: 'trapezoidal integral of (flow - baseline_flow) over t',
    source: 'definition',
    compute: (g) => excessFlow(g.t, g.flow, g.baseline_flow),
    cautions: (g) => [
      g.t[0]! > 10 / 60 && 'LATE_FIRST_FLOW',
      g.flow.at(-1)! > 1.1 * g.baseline_flow && 'INCOMPLETE_RECOVERY',
    ],
  }),
  define({
    key: 'debt_repayment_percent',
    name: 'debtRepayment',
    title: 'Repayment of the flow debt',
    inputs: {
      excess: single('mL/dL', 'excess', 'excess flow', 'finite'),
      debt: single('mL/dL', 'debt', 'flow debt', 'above 0'),
    },
    unit: '%',
    formula: '100 * excess / debt',
    source: 'definition',
    compute: (g) => debtRepayment(g.excess, g.debt),
  }),
  define({
    key: 'sigmoid_emax',
    name: 'sigmoidResponse',
    title: 'Sigmoid dose-response',
    inputs: {
      e0: kept(single('mL/min/dL', 'baselineEffect', 'effect without drug', 'finite')),
      emax: sameUnit(single('mL/min/dL', 'maximalEffect', 'maximal effect above baseline', 'finite'), 'e0'),
      ed50: kept(single('ug/min', 'halfMaximalDose', 'dose of half the maximal effect', 'above 0')),
      hill: single('1', 'hillSlope', 'Hill slope', 'above 0'),
      dose: sameUnit(single('ug/min', 'dose', 'dose', 'at least 0'), 'ed50'),
    },
    unit: ({ e0 }) => e0,
    unitAbout: 'that of e0',
    formula: 'e0 + emax * dose^hill / (ed50^hill + dose^hill)',
    source: 'Hill equation',
    compute: (g) => sigmoidResponse(g.e0, g.emax, g.ed50, g.hill, g.dose),
  }),
  define({
    key: 'percent_mvc_target',
    name: 'targetForce',
    title: 'Target force of a handgrip',
    inputs: {
      mvc: kept(single('N', 'maximalVoluntaryContraction', 'maximal voluntary contraction', 'above 0')),
      percent: single('%', 'percent', 'percent of the maximal voluntary contraction', '0 to 100'),
    },
    unit: ({ mvc }) => mvc,
    unitAbout: 'that of mvc',
    formula: 'mvc * percent / 100',
    source: 'definition',
    compute: (g) => targetForce(g.mvc, g.percent),
  }),
];
