import { Ajv2020 } from 'ajv/dist/2020.js';
import { describe, expect, it } from 'vitest';
import { compilePublished } from '#schemas/instruments/compile-instrument.ts';
import { libraryInstruments } from '#schemas/instruments/library/index.ts';
import { checkProtocol } from '#schemas/protocol/check-protocol.ts';
import { reedgrip } from '#schemas/protocol/demo/reedgrip.ts';
import { screepath } from '#schemas/protocol/demo/screepath.ts';
import { withUnblindingSpread } from '#schemas/protocol/protocol-levels.ts';
import { protocolSchema } from '#schemas/protocol/protocol-schema.ts';
import type { Protocol, RunSheetStep, VisitType } from '#schemas/protocol/protocol.ts';
import { withBlocksWrittenOut } from '#schemas/protocol/run-sheet.ts';
import { instrumentLibrary as library } from './instrument-library.ts';

const instruments = new Map(
  libraryInstruments.map(({ key, schema }) => [key, compilePublished(schema, library)]),
);
const validate = new Ajv2020({ allErrors: true, strict: true, strictRequired: false }).compile(
  protocolSchema,
);

const problemsOf = (protocol: Protocol) => checkProtocol(protocol, instruments, library);
const [screening, first, second, followUp] = screepath.visitTypes as [
  VisitType,
  VisitType,
  VisitType,
  VisitType,
];
const withVisits = (...visitTypes: VisitType[]): Protocol => ({ ...screepath, visitTypes });
const withFirst = (change: Partial<VisitType>): Protocol =>
  withVisits(screening, { ...first, ...change }, second, followUp);
const withStep = (key: string, change: Partial<RunSheetStep>): Protocol =>
  withFirst({ runSheet: first.runSheet.map((step) => (step.key === key ? { ...step, ...change } : step)) });

describe.each([
  ['SCREEPATH', screepath],
  ['REEDGRIP', reedgrip],
])('%s', (_, protocol) => {
  it('is a protocol by the schema, through JSON', () => {
    validate(JSON.parse(JSON.stringify(protocol)));
    expect(validate.errors ?? []).toEqual([]);
  });

  it('has no problems', () => {
    expect(problemsOf(protocol)).toEqual([]);
  });
});

describe('a protocol has a problem, at its place, when', () => {
  it.each<[string, Protocol, string, string]>([
    [
      'a step fills in an unknown instrument',
      withStep('checks', { instrument: 'tea-leaves' }),
      '/visitTypes/1/runSheet/0/instrument',
      'tea-leaves',
    ],
    [
      'a step is anchored to no step',
      withStep('exchange', { anchor: { kind: 'event', step: 'lunch' } }),
      '/visitTypes/1/runSheet/9/anchor/step',
      'no step lunch',
    ],
    [
      'a step is anchored to one that stamps no event',
      withStep('exchange', { anchor: { kind: 'event', step: 'checks' } }),
      '/visitTypes/1/runSheet/9/anchor/step',
      'stamps no event',
    ],
    [
      'anchors go in a circle',
      withStep('rest', { anchor: { kind: 'event', step: 'flow-before' } }),
      '/visitTypes/1/runSheet/3/anchor/step',
      'circle',
    ],
    [
      'a blinded coordinator would enter what unblinds',
      withStep('sample-before', { performedBy: 'coordinator' }),
      '/visitTypes/1/runSheet/4/performedBy',
      'belongs to the unblinded technician',
    ],
    [
      'a hold point opens after the longest time',
      withStep('wrist-cuffs-before', { maximumMinutes: 1 }),
      '/visitTypes/1/runSheet/7/holdPoint/minutes',
      'never opens',
    ],
    [
      'a hold point reads a field that is not there',
      withStep('wrist-cuffs-before', {
        holdPoint: {
          kind: 'expression',
          label: 'x',
          expression: 'a > 1.0',
          inputs: { a: { step: 'pressures-before', pointer: '/mood' } },
        },
      }),
      '/visitTypes/1/runSheet/6/holdPoint/inputs/a/pointer',
      'no field /mood',
    ],
    [
      'a hold point is no yes or no',
      withStep('wrist-cuffs-before', {
        holdPoint: {
          kind: 'expression',
          label: 'x',
          expression: 'a',
          inputs: { a: { step: 'pressures-before', pointer: '/armHeight' } },
        },
      }),
      '/visitTypes/1/runSheet/6/holdPoint/expression',
      'true or false',
    ],
    [
      'a blinded coordinator would ask about a value that unblinds',
      withStep('pressures-before', {
        holdPoint: {
          kind: 'expression',
          label: 'x',
          expression: 'a > 0.4',
          inputs: { a: { step: 'sample-before', pointer: '/haematocrit' } },
        },
      }),
      '/visitTypes/1/runSheet/5/holdPoint',
      'belongs to the unblinded technician',
    ],
    [
      'a measure is taken in another unit',
      withFirst({
        measures: [
          {
            key: 'm',
            timePoint: 'baseline',
            quantity: 'haematocrit',
            from: [{ step: 'sample-before', pointer: '/haemoglobin' }],
            combine: 'only',
          },
        ],
      }),
      '/visitTypes/1/measures/0/from/0/pointer',
      'taken in L/L',
    ],
    [
      'a measure says that it does not unblind though its field does',
      withFirst({ measures: [{ ...first.measures[3]!, unblinding: false }] }),
      '/visitTypes/1/measures/0/unblinding',
      'unblinds as well',
    ],
    [
      'a measure takes the only one of two',
      withFirst({ measures: [{ ...first.measures[0]!, combine: 'only' }] }),
      '/visitTypes/1/measures/0/combine',
      'several values',
    ],
    [
      'two steps share a key',
      withStep('cannula', { key: 'checks' }),
      '/visitTypes/1/runSheet/1/key',
      'taken',
    ],
    [
      'a crossover gives one condition only',
      { ...screepath, sequences: [{ key: 'a', label: 'A', conditions: ['sham', 'sham'] }] },
      '/sequences',
      'two sequences',
    ],
    [
      'a sequence names no condition',
      { ...reedgrip, sequences: [{ key: 'a', label: 'A', conditions: ['tea'] }, reedgrip.sequences[1]!] },
      '/sequences/0/conditions/0',
      'no condition tea',
    ],
    [
      'no group receives a condition',
      { ...reedgrip, sequences: [reedgrip.sequences[0]!] },
      '/sequences',
      'No group receives placebo-juice',
    ],
    [
      'a block cannot be balanced',
      { ...screepath, allocation: { blockSizes: [3], stratifyBySite: true } },
      '/allocation/blockSizes/0',
      'equally often',
    ],
    [
      'the washout is longer than the periods lie apart',
      { ...screepath, washoutDays: 100 },
      '/washoutDays',
      '91 days apart',
    ],
    [
      'two windows run into each other',
      withVisits(screening, first, second, { ...followUp, targetDay: 100 }),
      '/visitTypes/3/windowBefore',
      'runs into',
    ],
    ['a period has no visit', withVisits(screening, first, followUp), '/visitTypes', 'period 2'],
    [
      'a log has an unknown instrument',
      { ...screepath, participantLogs: [{ instrument: 'diary', label: 'Diary' }] },
      '/participantLogs/0/instrument',
      'diary',
    ],
    [
      'a live quantity is not in the library',
      {
        ...screepath,
        liveQuantities: [{ key: 'x', label: 'X', quantity: 'mood', inputs: {}, unblinding: false }],
      },
      '/liveQuantities/0/quantity',
      'mood',
    ],
    [
      'a live quantity takes what no visit measures',
      {
        ...screepath,
        liveQuantities: [
          {
            ...screepath.liveQuantities[0]!,
            inputs: { meanArterialPressure: 'meanArterialPressure', forearmBloodFlow: 'skinTemperature' },
          },
        ],
      },
      '/liveQuantities/0/inputs/forearmBloodFlow',
      'No visit measures',
    ],
    [
      'a live quantity takes one listed after it',
      {
        ...screepath,
        liveQuantities: [screepath.liveQuantities[3]!, ...screepath.liveQuantities.slice(0, 3)],
      },
      '/liveQuantities/0/inputs/resistance',
      'listed before',
    ],
  ])('%s', (_, protocol, pointer, words) => {
    const problems = problemsOf(protocol).filter((problem) => problem.pointer === pointer);
    expect(problems.map(({ message }) => message).join()).toContain(words);
  });
});

// proves RB-07
describe('unblinding', () => {
  const plain: Protocol = {
    ...screepath,
    visitTypes: screepath.visitTypes.map((visit) => ({
      ...visit,
      measures: visit.measures.map(({ unblinding: _, ...measure }) => measure),
    })),
    liveQuantities: screepath.liveQuantities.map((live) => ({ ...live, unblinding: false })),
  };
  const spread = withUnblindingSpread(plain, instruments);

  it('spreads from fields to measures', () => {
    const hidden = spread.visitTypes[1]?.measures
      .filter(({ unblinding }) => unblinding)
      .map(({ quantity }) => quantity);
    const blood = ['haematocrit', 'haemoglobin', 'plasmaViscosity', 'totalProtein'];
    expect(hidden).toEqual([...blood, ...blood]);
  });

  it('spreads from measures to live quantities, and on along them', () => {
    expect(spread.liveQuantities.map(({ key, unblinding }) => [key, unblinding])).toEqual([
      ['forearm-vascular-resistance', false],
      ['forearm-vascular-conductance', false],
      ['blood-viscosity', true],
      ['forearm-vascular-hindrance', true],
    ]);
  });
});

describe('a block', () => {
  const visit: VisitType = {
    ...first,
    runSheet: first.runSheet.slice(3, 9),
    blocks: [
      {
        key: 'doses',
        label: 'Doses',
        steps: ['wrist-cuffs-before', 'flow-before'],
        repeats: [
          { key: 'low', label: 'low dose' },
          { key: 'high', label: 'high dose' },
        ],
        minutesApart: 10,
      },
    ],
    measures: [],
  };

  it('is written out once for each repeat, later by its spacing, anchors kept within a repeat', () => {
    const steps = withBlocksWrittenOut(visit).runSheet.filter(({ key }) => /low|high/.test(key));
    expect(
      steps.map(({ key, plannedMinute, anchor }) => [
        key,
        plannedMinute,
        anchor.kind === 'event' && anchor.step,
      ]),
    ).toEqual([
      ['wrist-cuffs-before-low', 33, 'rest'],
      ['wrist-cuffs-before-high', 43, 'rest'],
      ['flow-before-low', 1, 'wrist-cuffs-before-low'],
      ['flow-before-high', 1, 'wrist-cuffs-before-high'],
    ]);
    expect(steps[3]?.holdPoint).toMatchObject({ step: 'wrist-cuffs-before-high' });
  });

  it('is checked as it is written out', () => {
    const inBlock = problemsOf(withFirst(visit)).filter(({ pointer }) =>
      pointer.startsWith('/visitTypes/1/'),
    );
    // The step after the block is anchored to a step that now comes twice.
    expect(inBlock.map(({ pointer }) => pointer)).toEqual(['/visitTypes/1/runSheet/5/anchor/step']);
  });
});
