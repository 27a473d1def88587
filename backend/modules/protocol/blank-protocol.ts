import type { Protocol } from '#schemas/protocol/protocol.ts';

/** Where a protocol begins: every part is there, the ones that only its author can know are to be written. */
export const blankProtocol = (title: string): Protocol => ({
  title,
  design: 'single-group',
  plannedParticipants: 1,
  conditions: [{ key: 'condition', label: 'Condition' }],
  sequences: [{ key: 'sequence', label: 'Sequence', conditions: ['condition'] }],
  sites: [],
  allocation: { blockSizes: [], stratifyBySite: true },
  visitTypes: [
    {
      key: 'visit',
      label: 'Visit',
      targetDay: 1,
      windowBefore: 0,
      windowAfter: 0,
      period: 1,
      runSheet: [
        {
          key: 'rest',
          label: 'Rest, supine',
          anchor: { kind: 'visit-start' },
          plannedMinute: 0,
          durationMinutes: 20,
          performedBy: 'coordinator',
        },
      ],
      measures: [],
    },
  ],
  liveQuantities: [],
  participantLogs: [],
  missedVisitReasons: ['Participant unwell', 'Participant not available', 'Withdrawn'],
  safetyLimits: [],
});
