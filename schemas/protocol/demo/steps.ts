import type { RunSheetStep } from '../protocol.ts';

/** A coordinator's step that counts from the start of the visit. */
export function step(
  key: string,
  label: string,
  plannedMinute: number,
  durationMinutes: number,
): RunSheetStep {
  return {
    key,
    label,
    anchor: { kind: 'visit-start' },
    plannedMinute,
    durationMinutes,
    performedBy: 'coordinator',
  };
}

/** A coordinator's step that counts from the event of another. */
export function after(
  anchor: string,
  key: string,
  label: string,
  plannedMinute: number,
  durationMinutes: number,
): RunSheetStep {
  return { ...step(key, label, plannedMinute, durationMinutes), anchor: { kind: 'event', step: anchor } };
}
