import type { Measure, Protocol, RunSheetStep, VisitType } from '../protocol.ts';
import { after, step } from './steps.ts';

/**
 * SCREEPATH (invented): isovolaemic haemodilution against sham in adults with a high haematocrit at altitude.
 *
 * Order of a visit: common practice of plethysmography laboratories. Washout of twelve weeks: haemoglobin mass took
 * 36 ± 11 days to recover after 550 mL (Pottgiesser et al. 2008, Transfusion).
 */
export const screepath: Protocol = {
  title:
    'SCREEPATH: vessel tone after isovolaemic haemodilution in adults with a high haematocrit at altitude',
  design: 'crossover-2x2',
  plannedParticipants: 24,
  conditions: [
    { key: 'haemodilution', label: 'Haemodilution' },
    { key: 'sham', label: 'Sham exchange' },
  ],
  sequences: [
    { key: 'dilution-first', label: 'Haemodilution, then sham', conditions: ['haemodilution', 'sham'] },
    { key: 'sham-first', label: 'Sham, then haemodilution', conditions: ['sham', 'haemodilution'] },
  ],
  washoutDays: 84,
  sites: ['upper-scree', 'tarn-nook'],
  allocation: { blockSizes: [2, 4], stratifyBySite: true },
  visitTypes: [
    {
      key: 'screening',
      label: 'Screening',
      targetDay: -14,
      windowBefore: 14,
      windowAfter: 7,
      runSheet: screeningSteps(),
      measures: [],
    },
    exchangeVisit(1, 1, { windowBefore: 3, windowAfter: 3 }),
    exchangeVisit(2, 92, { windowBefore: 3, windowAfter: 14 }),
    {
      key: 'follow-up',
      label: 'Follow-up',
      targetDay: 120,
      windowBefore: 7,
      windowAfter: 14,
      runSheet: followUpSteps(),
      measures: [],
    },
  ],
  liveQuantities: [
    {
      key: 'forearm-vascular-resistance',
      label: 'Forearm vascular resistance',
      quantity: 'forearmVascularResistance',
      inputs: { meanArterialPressure: 'meanArterialPressure', forearmBloodFlow: 'forearmBloodFlow' },
      // A fall of a quarter tells the arm and would bend which slopes are accepted.
      unblinding: true,
    },
    {
      key: 'forearm-vascular-conductance',
      label: 'Forearm vascular conductance',
      quantity: 'forearmVascularConductance',
      inputs: { meanArterialPressure: 'meanArterialPressure', forearmBloodFlow: 'forearmBloodFlow' },
      unblinding: true,
    },
    {
      key: 'blood-viscosity',
      label: 'Blood viscosity at 200 /s (model)',
      quantity: 'bloodViscosityQuemadaCokelet',
      inputs: {
        haematocrit: 'haematocrit',
        plasmaViscosity: 'plasmaViscosity',
        plasmaTemperature: { value: 37, unit: 'Cel' },
        shearRate: { value: 200, unit: '/s' },
      },
      unblinding: true,
    },
    {
      key: 'forearm-vascular-hindrance',
      label: 'Hindrance (resistance over viscosity)',
      quantity: 'forearmVascularHindrance',
      inputs: {
        resistance: { live: 'forearm-vascular-resistance' },
        viscosity: { live: 'blood-viscosity' },
      },
      unblinding: true,
    },
  ],
  participantLogs: [
    { instrument: 'adverse-event', label: 'Adverse events' },
    { instrument: 'concomitant-medication', label: 'Medication' },
    { instrument: 'protocol-deviation', label: 'Deviations' },
  ],
  missedVisitReasons: [
    'Participant unwell',
    'Participant not available',
    'Staff or device not available',
    'Road closed',
    'Withdrawn',
  ],
  safetyLimits: [
    {
      key: 'haemoglobin-floor',
      label: 'Haemoglobin floor',
      text: 'No further withdrawal when haemoglobin is below 12.5 g/dL. Invented for this demonstration: a real limit comes from the approved protocol.',
    },
    {
      key: 'cumulative-volume',
      label: 'Cumulative volume',
      text: 'At most 1200 mL withdrawn in a participant over the whole study, cells returned not counted. Invented for this demonstration.',
    },
    {
      key: 'pressure',
      label: 'Pressure',
      text: 'Stop the exchange and call the study physician when systolic pressure stays below 90 mmHg for two readings, or on chest discomfort or fainting.',
    },
  ],
};

function screeningSteps(): RunSheetStep[] {
  return [
    {
      ...step('consent', 'Consent', 0, 30),
      instrument: 'consent',
      instructions: 'Nothing is measured before this form is signed.',
    },
    {
      ...step('demographics', 'Demographics and anthropometry', 30, 15),
      instrument: 'demographics-and-anthropometry',
    },
    { ...step('checks', 'Pre-visit checks', 45, 10), instrument: 'pre-visit-checks' },
    { ...step('rest', 'Rest, supine', 55, 20), event: 'Rest began' },
    {
      ...after('rest', 'blood-sample', 'Blood sample', 20, 10),
      instrument: 'blood-sample',
      performedBy: 'unblinded-technician',
      holdPoint: { kind: 'minutes-since', label: 'Supine for 20 min', minutes: 20, step: 'rest' },
      caution: 'blood-sampling',
    },
    { ...after('rest', 'pressures', 'Resting pressures', 30, 10), instrument: 'resting-pressures' },
  ];
}

function followUpSteps(): RunSheetStep[] {
  return [
    { ...step('checks', 'Pre-visit checks', 0, 10), instrument: 'pre-visit-checks' },
    { ...step('rest', 'Rest, supine', 10, 20), event: 'Rest began' },
    {
      ...after('rest', 'blood-sample', 'Blood sample', 20, 10),
      instrument: 'blood-sample',
      performedBy: 'unblinded-technician',
      holdPoint: { kind: 'minutes-since', label: 'Supine for 20 min', minutes: 20, step: 'rest' },
      caution: 'blood-sampling',
    },
    { ...after('rest', 'pressures', 'Resting pressures', 30, 10), instrument: 'resting-pressures' },
    { ...after('rest', 'end', 'End of participation', 45, 10), instrument: 'end-of-participation' },
  ];
}

function exchangeVisit(
  period: 1 | 2,
  targetDay: number,
  window: Pick<VisitType, 'windowBefore' | 'windowAfter'>,
): VisitType {
  return {
    key: `period-${period}`,
    label: `Period ${period}`,
    targetDay,
    ...window,
    period,
    runSheet: [
      {
        ...step('checks', 'Pre-visit checks', 0, 10),
        instrument: 'pre-visit-checks',
        instructions: 'Let the participant void.',
      },
      {
        ...step('cannula', 'Cannula', 10, 10),
        performedBy: 'unblinded-technician',
        instructions: 'Forearm vein of the arm that takes the exchange; opaque lines from here on.',
        caution: 'blood-sampling',
      },
      {
        ...step('calibration', 'Gauges, cuffs, calibration', 20, 10),
        instrument: 'room-and-calibration-log',
        instructions:
          'Gauges at the widest part of both forearms, arms supported a little above the heart. Calibrate at the gain that is used.',
      },
      {
        ...step('rest', 'Rest, supine', 30, 20),
        event: 'Rest began',
        instructions: 'Quiet room, 21 to 25 °C.',
      },
      ...measurementSteps('before', 'rest', 'before the exchange'),
      exchangeStep(period),
      { ...after('exchange', 'rest-after', 'Rest, supine', 0, 20), event: 'Rest after the exchange began' },
      ...measurementSteps('after', 'rest-after', 'after the exchange'),
      {
        ...after('flow-after', 'guess', 'Blinding guess', 20, 5),
        instrument: 'blinding-guess',
        instructions: 'Ask the participant first, then answer for yourself in a second entry.',
      },
    ],
    measures: [...measures('baseline', 'before'), ...measures('after', 'after')],
  };
}

/** Sample, pressures, wrist cuffs, flow block, pressures again: the mean pressure brackets the block. */
function measurementSteps(when: 'before' | 'after', rest: string, words: string): RunSheetStep[] {
  return [
    {
      ...after(rest, `sample-${when}`, `Blood sample ${words}`, 20, 5),
      instrument: 'blood-sample',
      performedBy: 'unblinded-technician',
      instructions: 'Without tourniquet. Two tubes, a third when they differ by more than 0.01.',
      holdPoint: { kind: 'minutes-since', label: 'Supine for 20 min', minutes: 20, step: rest },
      caution: 'blood-sampling',
    },
    {
      ...after(rest, `pressures-${when}`, `Pressures ${words}`, 25, 6),
      instrument: 'resting-pressures',
      instructions: 'Deflate the collecting cuff first: no cuff above a gauge that is being read.',
    },
    {
      ...after(rest, `wrist-cuffs-${when}`, 'Wrist cuffs up', 33, 1),
      event: 'Wrist cuffs up',
      instructions: 'Both wrists, at least 50 mmHg above the systolic pressure.',
      holdPoint: {
        kind: 'expression',
        label: 'Last two systolic pressures within 5 mmHg',
        expression: 'max(systolic) - min(systolic) <= 5.0',
        inputs: { systolic: { step: `pressures-${when}`, pointer: '/systolic' } },
      },
      maximumMinutes: 6,
      caution: 'cuff-occlusion',
    },
    {
      ...after(`wrist-cuffs-${when}`, `flow-${when}`, `Flow block ${words}`, 1, 3),
      instrument: 'forearm-plethysmography',
      instructions: 'Three minutes of 10 s occluded, 5 s free. Release all cuffs at the end.',
      holdPoint: {
        kind: 'minutes-since',
        label: 'Wrist cuffs up for 60 s',
        minutes: 1,
        step: `wrist-cuffs-${when}`,
      },
      event: 'Cuffs released',
      caution: 'cuff-occlusion',
    },
    {
      ...after(`flow-${when}`, `pressures-bracket-${when}`, 'Pressures after the block', 2, 6),
      instrument: 'resting-pressures',
      instructions: 'Once the hands have recovered.',
    },
  ];
}

function exchangeStep(period: 1 | 2): RunSheetStep {
  const exchange: RunSheetStep = {
    ...after('flow-before', 'exchange', 'Exchange', 12, 45),
    instrument: 'blood-exchange',
    performedBy: 'unblinded-technician',
    instructions:
      'Same circuit, duration and volumes for both conditions; opaque lines; the screen faces away from the bed.',
    event: 'Exchange ended',
    maximumMinutes: 75,
    caution: 'blood-exchange',
  };
  if (period === 1) return exchange;
  return {
    ...exchange,
    holdPoint: {
      kind: 'expression',
      label: 'Haematocrit back to that of period 1',
      expression: 'abs(now - first) <= 0.02',
      inputs: {
        now: { step: 'sample-before', pointer: '/haematocrit' },
        first: { visitType: 'period-1', step: 'sample-before', pointer: '/haematocrit' },
      },
    },
  };
}

function measures(timePoint: 'baseline' | 'after', when: 'before' | 'after'): Measure[] {
  const pressures = [`pressures-${when}`, `pressures-bracket-${when}`];
  const both = (pointer: string) => pressures.map((key) => ({ step: key, pointer }));
  const sample = (key: string, quantity: Measure['quantity'], pointer: string): Measure => {
    return {
      key: `${key}-${timePoint}`,
      timePoint,
      quantity,
      from: [{ step: `sample-${when}`, pointer }],
      combine: 'only',
      unblinding: true,
    };
  };
  return [
    {
      key: `mean-pressure-${timePoint}`,
      timePoint,
      quantity: 'meanArterialPressure',
      from: both('/meanArterialPressure'),
      combine: 'mean',
    },
    {
      key: `heart-rate-${timePoint}`,
      timePoint,
      quantity: 'heartRate',
      from: both('/heartRate'),
      combine: 'mean',
    },
    {
      key: `flow-${timePoint}`,
      timePoint,
      quantity: 'forearmBloodFlow',
      from: [{ step: `flow-${when}`, pointer: '/meanFlow' }],
      combine: 'only',
    },
    sample('haematocrit', 'haematocrit', '/haematocrit'),
    sample('haemoglobin', 'haemoglobin', '/haemoglobin'),
    sample('plasma-viscosity', 'plasmaViscosity', '/plasmaViscosity'),
    sample('total-protein', 'totalProtein', '/totalProtein'),
  ];
}
