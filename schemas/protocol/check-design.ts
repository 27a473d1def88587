import type { Protocol, ProtocolProblem } from './protocol.ts';
import { withBlocksWrittenOut } from './run-sheet.ts';

/** Judges conditions, sequences, allocation and the order of visits against the design. */
export function designProblems(protocol: Protocol): ProtocolProblem[] {
  return [
    ...doubledKeys(protocol),
    ...sequenceProblems(protocol),
    ...allocationProblems(protocol),
    ...visitOrderProblems(protocol),
    ...periodProblems(protocol),
  ];
}

function doubledKeys(protocol: Protocol): ProtocolProblem[] {
  const { conditions, sequences, visitTypes, liveQuantities, safetyLimits, participantLogs } = protocol;
  const keys = (items: { key: string }[]) => items.map(({ key }) => key);
  return [
    ...doubled(keys(conditions), (index) => `/conditions/${index}/key`),
    ...doubled(keys(sequences), (index) => `/sequences/${index}/key`),
    ...doubled(protocol.sites, (index) => `/sites/${index}`),
    ...doubled(keys(liveQuantities), (index) => `/liveQuantities/${index}/key`),
    ...doubled(keys(safetyLimits), (index) => `/safetyLimits/${index}/key`),
    ...doubled(
      participantLogs.map(({ instrument }) => instrument),
      (index) => `/participantLogs/${index}/instrument`,
    ),
    ...doubled(keys(visitTypes), (index) => `/visitTypes/${index}/key`),
    ...visitTypes.flatMap((visitType, visit) => [
      ...doubled(keys(visitType.runSheet), (index) => `/visitTypes/${visit}/runSheet/${index}/key`),
      ...doubled(keys(visitType.measures), (index) => `/visitTypes/${visit}/measures/${index}/key`),
      ...blockProblems(visitType, `/visitTypes/${visit}`),
    ]),
  ];
}

function blockProblems(visitType: Protocol['visitTypes'][number], place: string): ProtocolProblem[] {
  const blocks = visitType.blocks ?? [];
  if (blocks.length === 0) return [];
  const known = visitType.runSheet.map(({ key }) => key);
  const problems = blocks.flatMap((block, index) =>
    block.steps.flatMap((step, at) =>
      known.includes(step)
        ? []
        : [{ pointer: `${place}/blocks/${index}/steps/${at}`, message: `There is no step ${step}` }],
    ),
  );
  const inBlocks = blocks.flatMap(({ steps }) => steps);
  if (new Set(inBlocks).size < inBlocks.length) {
    problems.push({ pointer: `${place}/blocks`, message: 'A step can belong to one block only' });
  }
  const written = withBlocksWrittenOut(visitType).runSheet.map(({ key }) => key);
  if (new Set(written).size < written.length) {
    problems.push({
      pointer: `${place}/blocks`,
      message: 'Written out, two steps would have one key: rename a repeat',
    });
  }
  return problems;
}

function doubled(keys: string[], pointer: (index: number) => string): ProtocolProblem[] {
  return keys.flatMap((key, index) =>
    keys.indexOf(key) < index
      ? [{ pointer: pointer(index), message: `${key} is taken: give each its own key` }]
      : [],
  );
}

function sequenceProblems({ design, conditions, sequences, washoutDays }: Protocol): ProtocolProblem[] {
  const problems: ProtocolProblem[] = [];
  const known = conditions.map(({ key }) => key);
  for (const [index, sequence] of sequences.entries()) {
    for (const [at, condition] of sequence.conditions.entries()) {
      if (!known.includes(condition)) {
        problems.push({
          pointer: `/sequences/${index}/conditions/${at}`,
          message: `There is no condition ${condition}`,
        });
      }
    }
  }
  const orders = sequences.map((sequence) => sequence.conditions.join(' '));
  if (new Set(orders).size < orders.length)
    problems.push({ pointer: '/sequences', message: 'Two sequences are the same' });
  const refuse = (message: string) => problems.push({ pointer: '/sequences', message });
  if (design === 'crossover-2x2') {
    const [a = '', b = ''] = known;
    const mirrored = orders.length === 2 && orders.includes(`${a} ${b}`) && orders.includes(`${b} ${a}`);
    if (known.length !== 2)
      problems.push({ pointer: '/conditions', message: 'A 2×2 crossover has two conditions' });
    else if (!mirrored)
      refuse('A 2×2 crossover has two sequences: each condition first in one, second in the other');
    if (washoutDays === undefined)
      problems.push({ pointer: '/washoutDays', message: 'Say how long the washout lasts' });
  }
  if (design === 'parallel') {
    if (sequences.some((sequence) => sequence.conditions.length !== 1))
      refuse('In parallel groups a sequence is one condition');
    const given = sequences.flatMap((sequence) => sequence.conditions);
    const idle = known.filter((condition) => !given.includes(condition));
    if (idle.length > 0) refuse(`No group receives ${idle.join(', ')}`);
    if (sequences.length < 2) refuse('Parallel groups are at least two');
  }
  if (design === 'single-group' && sequences.length !== 1) refuse('A single group has one sequence');
  return problems;
}

function allocationProblems({ design, sequences, allocation }: Protocol): ProtocolProblem[] {
  if (design === 'single-group') return [];
  if (allocation.blockSizes.length === 0)
    return [{ pointer: '/allocation/blockSizes', message: 'Give at least one block size' }];
  return allocation.blockSizes.flatMap((size, index) =>
    size % sequences.length === 0
      ? []
      : [
          {
            pointer: `/allocation/blockSizes/${index}`,
            message: `A block of ${size} cannot hold ${sequences.length} sequences equally often`,
          },
        ],
  );
}

/** Windows must not run into each other, or one day would belong to two visits. */
function visitOrderProblems({ visitTypes }: Protocol): ProtocolProblem[] {
  const days = visitTypes.map((visit, index) => ({ visit, index, day: elapsed(visit.targetDay) }));
  const ordered = [...days].sort((a, b) => a.day - b.day);
  return ordered.flatMap((later, at) => {
    const earlier = ordered[at - 1];
    if (!earlier || earlier.day + earlier.visit.windowAfter < later.day - later.visit.windowBefore) return [];
    return [
      {
        pointer: `/visitTypes/${later.index}/windowBefore`,
        message: `The window of ${later.visit.label} runs into that of ${earlier.visit.label}`,
      },
    ];
  });
}

/** Each period of the longest sequence has a visit; a crossover's periods lie at least a washout apart. */
function periodProblems({ design, sequences, visitTypes, washoutDays }: Protocol): ProtocolProblem[] {
  const periods = Math.max(...sequences.map(({ conditions }) => conditions.length));
  const problems = visitTypes.flatMap(({ period, label }, index) =>
    period !== undefined && period > periods
      ? [
          {
            pointer: `/visitTypes/${index}/period`,
            message: `${label} is in period ${period}; the sequences have ${periods}`,
          },
        ]
      : [],
  );
  for (let period = 1; period <= periods; period += 1) {
    if (visitTypes.some((visit) => visit.period === period)) continue;
    problems.push({ pointer: '/visitTypes', message: `No visit belongs to period ${period}` });
  }
  if (design !== 'crossover-2x2' || washoutDays === undefined) return problems;
  const lastOfFirst = Math.max(
    ...visitTypes.filter(({ period }) => period === 1).map((visit) => elapsed(visit.targetDay)),
  );
  const firstOfSecond = Math.min(
    ...visitTypes.filter(({ period }) => period === 2).map((visit) => elapsed(visit.targetDay)),
  );
  if (firstOfSecond - lastOfFirst < washoutDays) {
    const message = `The periods lie ${firstOfSecond - lastOfFirst} days apart, the washout lasts ${washoutDays}`;
    problems.push({ pointer: '/washoutDays', message });
  }
  return problems;
}

/** Study days counted without the gap at 0. */
function elapsed(studyDay: number): number {
  return studyDay < 0 ? studyDay + 1 : studyDay;
}
