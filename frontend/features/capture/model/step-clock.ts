import type { StepEventDto } from '#schemas/api/capture.ts';
import type { RunSheetStep } from '#schemas/protocol/protocol.ts';

/** One step of the run sheet as the rail shows it. */
export interface StepClock {
  step: RunSheetStep;
  /** Minutes after the anchor, as planned. */
  planned: number;
  /** Instant the anchor happened; null while it has not. */
  anchorAt: number | null;
  begunAt: number | null;
  endedAt: number | null;
  /** Minutes from the anchor to the beginning, as it went. */
  actual: number | null;
  skipped: boolean;
  hold: Hold | null;
}

/** A hold point: open when its condition holds, or when it was passed with a reason. */
export interface Hold {
  label: string;
  state: 'shut' | 'open' | 'passed';
  /** Seconds since the event it waits on; null before it. */
  elapsed: number | null;
  /** Seconds it waits for; null for a condition on values. */
  needed: number | null;
}

const instantOf = (
  events: readonly StepEventDto[],
  stepKey: string,
  kinds: readonly string[],
): number | null => {
  const found = events.filter((event) => event.stepKey === stepKey && kinds.includes(event.kind)).at(-1);
  return found === undefined ? null : Date.parse(found.observedAt);
};

/** When the event of a step happened: its stamp, else its end, else its beginning. */
const eventOf = (events: readonly StepEventDto[], stepKey: string): number | null =>
  instantOf(events, stepKey, ['stamped']) ??
  instantOf(events, stepKey, ['ended']) ??
  instantOf(events, stepKey, ['begun']);

/** Puts every step on its clock: planned and actual minutes count from its own anchor. */
export function stepClocks(
  steps: readonly RunSheetStep[],
  events: readonly StepEventDto[],
  startedAt: string | null,
  now: number,
): StepClock[] {
  return steps.map((step) => {
    const anchorAt =
      step.anchor.kind === 'visit-start'
        ? startedAt === null
          ? null
          : Date.parse(startedAt)
        : eventOf(events, step.anchor.step);
    const begunAt = instantOf(events, step.key, ['begun']) ?? instantOf(events, step.key, ['stamped']);
    return {
      step,
      planned: step.plannedMinute,
      anchorAt,
      begunAt,
      endedAt: instantOf(events, step.key, ['ended']),
      actual: begunAt === null || anchorAt === null ? null : Math.round((begunAt - anchorAt) / 60_000),
      skipped: instantOf(events, step.key, ['skipped']) !== null,
      hold: holdOf(step, events, now),
    };
  });
}

function holdOf(step: RunSheetStep, events: readonly StepEventDto[], now: number): Hold | null {
  const { holdPoint } = step;
  if (holdPoint === undefined) return null;
  if (instantOf(events, step.key, ['hold-passed']) !== null) {
    return { label: holdPoint.label, state: 'passed', elapsed: null, needed: null };
  }
  if (holdPoint.kind === 'expression')
    return { label: holdPoint.label, state: 'shut', elapsed: null, needed: null };
  const since = eventOf(events, holdPoint.step);
  const needed = holdPoint.minutes * 60;
  const elapsed = since === null ? null : Math.max(0, Math.floor((now - since) / 1000));
  return {
    label: holdPoint.label,
    state: elapsed !== null && elapsed >= needed ? 'open' : 'shut',
    elapsed,
    needed,
  };
}
