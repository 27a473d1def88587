import type { HoldPoint, Protocol, RunSheetStep, VisitType } from '#schemas/protocol/protocol.ts';

export const designWords: Record<Protocol['design'], string> = {
  'crossover-2x2': '2×2 crossover',
  parallel: 'parallel groups',
  'single-group': 'single group, repeated',
};

export const performerWords: Record<RunSheetStep['performedBy'], string> = {
  coordinator: 'coordinator',
  'unblinded-technician': 'unblinded technician',
};

/** `day 8, 1 day early to 2 days late` */
export function windowInWords({ targetDay, windowBefore, windowAfter }: VisitType): string {
  if (windowBefore === 0 && windowAfter === 0) return `day ${dayInWords(targetDay)}, that day only`;
  return `day ${dayInWords(targetDay)}, ${days(windowBefore)} early to ${days(windowAfter)} late`;
}

export const dayInWords = (day: number): string => String(day).replace('-', '−');

const days = (count: number): string => (count === 1 ? '1 day' : `${count} days`);

export function holdPointInWords(holdPoint: HoldPoint, steps: readonly RunSheetStep[]): string {
  if (holdPoint.kind === 'expression') return `waits for: ${holdPoint.label}`;
  const step = steps.find(({ key }) => key === holdPoint.step);
  return `waits until ${holdPoint.minutes} min after ${step?.event ?? step?.label ?? holdPoint.step}`;
}

/** Steps that count their minutes from the same moment. */
export interface AnchoredSteps {
  key: string;
  /** From when the minutes count, in words. */
  from: string;
  steps: RunSheetStep[];
  /** The last planned minute of the group, for its scale. */
  minutes: number;
}

/** The run sheet in its order, divided where the minutes begin to count from another moment. */
export function anchoredSteps(steps: readonly RunSheetStep[]): AnchoredSteps[] {
  const groups: AnchoredSteps[] = [];
  for (const step of steps) {
    const from = anchorInWords(step, steps);
    const last = groups.at(-1);
    const end = step.plannedMinute + step.durationMinutes;
    if (last?.from === from) {
      last.steps.push(step);
      last.minutes = Math.max(last.minutes, end);
    } else groups.push({ key: `${groups.length} ${from}`, from, steps: [step], minutes: end });
  }
  return groups;
}

function anchorInWords({ anchor }: RunSheetStep, steps: readonly RunSheetStep[]): string {
  if (anchor.kind === 'visit-start') return 'From the start of the visit';
  const step = steps.find(({ key }) => key === anchor.step);
  // Several steps may stamp an event of one name: which one is meant is said with its step.
  return step?.event === undefined
    ? `From “${step?.label ?? anchor.step}”`
    : `From “${step.event}” of ${step.label}`;
}
