import { addDays } from '#schemas/protocol/visit-window.ts';

/** The window around a planned day, by the days the protocol allows. */
export const windowAround = (
  plannedOn: string,
  { windowBefore, windowAfter }: { windowBefore: number; windowAfter: number },
): { windowFrom: string; windowTo: string } => ({
  windowFrom: addDays(plannedOn, -windowBefore),
  windowTo: addDays(plannedOn, windowAfter),
});
