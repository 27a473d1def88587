import type { Measure, Protocol, RunSheetStep, VisitType } from '../protocol.ts';
import { after, step } from './steps.ts';

/**
 * REEDGRIP (invented): nitrate-rich juice against placebo and forearm conductance during rhythmic handgrip.
 *
 * Plethysmography fails during contractions, so flow is Doppler; 15 and 25 % of maximum as in
 * Physiol Rep 2018;6:e13572. Wait of 150 min after the juice: common practice.
 */
export const reedgrip: Protocol = {
  title: 'REEDGRIP: nitrate-rich juice and forearm conductance during rhythmic handgrip',
  design: 'parallel',
  plannedParticipants: 10,
  conditions: [
    { key: 'nitrate-juice', label: 'Nitrate-rich juice' },
    { key: 'placebo-juice', label: 'Nitrate-depleted juice' },
  ],
  sequences: [
    { key: 'nitrate', label: 'Nitrate-rich juice', conditions: ['nitrate-juice'] },
    { key: 'placebo', label: 'Nitrate-depleted juice', conditions: ['placebo-juice'] },
  ],
  sites: ['reed-bank'],
  allocation: { blockSizes: [2, 4], stratifyBySite: false },
  visitTypes: [
    {
      key: 'screening',
      label: 'Screening',
      targetDay: -7,
      windowBefore: 14,
      windowAfter: 5,
      runSheet: [
        { ...step('consent', 'Consent', 0, 30), instrument: 'consent' },
        {
          ...step('demographics', 'Demographics and anthropometry', 30, 15),
          instrument: 'demographics-and-anthropometry',
        },
        { ...step('checks', 'Pre-visit checks', 45, 10), instrument: 'pre-visit-checks' },
        { ...step('pressures', 'Resting pressures', 60, 10), instrument: 'resting-pressures' },
      ],
      measures: [],
    },
    testVisit('first-test', 'First test', 1, 0, 0),
    testVisit('second-test', 'Second test', 8, 1, 2),
    {
      key: 'follow-up',
      label: 'Follow-up call',
      targetDay: 22,
      windowBefore: 3,
      windowAfter: 7,
      runSheet: [
        { ...step('guess', 'Blinding guess', 0, 5), instrument: 'blinding-guess' },
        { ...step('end', 'End of participation', 5, 10), instrument: 'end-of-participation' },
      ],
      measures: [],
    },
  ],
  liveQuantities: [],
  participantLogs: [
    { instrument: 'adverse-event', label: 'Adverse events' },
    { instrument: 'concomitant-medication', label: 'Medication' },
    { instrument: 'protocol-deviation', label: 'Deviations' },
  ],
  missedVisitReasons: [
    'Participant unwell',
    'Participant not available',
    'Staff or device not available',
    'Withdrawn',
  ],
  safetyLimits: [
    {
      key: 'exercise',
      label: 'Exercise',
      text: 'Stop the handgrip when systolic pressure is above 220 mmHg, on chest discomfort, or when the participant asks.',
    },
  ],
};

function testVisit(
  key: string,
  label: string,
  targetDay: number,
  windowBefore: number,
  windowAfter: number,
): VisitType {
  return {
    key,
    label,
    targetDay,
    windowBefore,
    windowAfter,
    period: 1,
    runSheet: [
      {
        ...step('checks', 'Pre-visit checks', 0, 10),
        instrument: 'pre-visit-checks',
        instructions: 'Ask about antiseptic mouthwash: it stops the bacteria that reduce nitrate.',
      },
      { ...step('room', 'Room log', 10, 5), instrument: 'room-and-calibration-log' },
      { ...step('rest', 'Rest, supine', 15, 20), event: 'Rest began' },
      {
        ...after('rest', 'pressures', 'Resting pressures', 15, 5),
        instrument: 'resting-pressures',
      },
      ...dopplerSteps('before', 'rest', 20),
      {
        ...after('exercise-before', 'juice', 'Juice', 10, 5),
        instrument: 'oral-dose',
        performedBy: 'unblinded-technician',
        instructions: 'Numbered bottle, opaque, with a straw. The coordinator leaves the room.',
        event: 'Juice drunk',
        caution: 'unblinding',
      },
      ...dopplerSteps('after', 'juice', 150, {
        kind: 'minutes-since',
        label: '150 min since the juice',
        minutes: 150,
        step: 'juice',
      }),
    ],
    measures: [
      ...measures('rest-baseline', 'rest-before'),
      ...measures('exercise-baseline', 'exercise-before'),
      ...measures('rest-after', 'rest-after'),
      ...measures('exercise-after', 'exercise-after'),
    ],
  };
}

function dopplerSteps(
  when: 'before' | 'after',
  anchor: string,
  minute: number,
  holdPoint?: RunSheetStep['holdPoint'],
): RunSheetStep[] {
  return [
    {
      ...after(anchor, `rest-${when}`, `Doppler at rest, ${when} the juice`, minute, 5),
      instrument: 'handgrip-doppler',
      instructions: 'Phase: rest. Mark the position of the probe on the skin.',
      event: 'Rest recorded',
      ...(holdPoint ? { holdPoint } : {}),
    },
    {
      ...after(`rest-${when}`, `exercise-${when}`, `Handgrip, ${when} the juice`, 5, 6),
      instrument: 'handgrip-doppler',
      instructions:
        'Phase: exercise. 15 % of maximum, 1 s on and 2 s off for five minutes; record the last minute.',
      event: 'Handgrip ended',
      maximumMinutes: 10,
      caution: 'handgrip',
    },
  ];
}

function measures(timePoint: string, stepKey: string): Measure[] {
  const only = (key: string, quantity: Measure['quantity'], pointer: string): Measure => {
    return {
      key: `${key}-${timePoint}`,
      timePoint,
      quantity,
      from: [{ step: stepKey, pointer }],
      combine: 'only',
    };
  };
  return [
    only('mean-pressure', 'meanArterialPressure', '/meanPressure'),
    only('flow', 'brachialBloodFlow', '/brachialFlow'),
    only('diameter', 'brachialDiameter', '/diameter'),
    only('heart-rate', 'heartRate', '/heartRate'),
  ];
}
