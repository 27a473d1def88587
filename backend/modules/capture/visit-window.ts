const dayLength = 86_400_000;

/** A calendar day some days later; days are counted in UTC, where each has the same length. */
export const addDays = (day: string, days: number): string =>
  new Date(Date.parse(`${day}T00:00:00Z`) + days * dayLength).toISOString().slice(0, 10);

/** The window around a planned day, by the days the protocol allows. */
export const windowAround = (
  plannedOn: string,
  { windowBefore, windowAfter }: { windowBefore: number; windowAfter: number },
): { windowFrom: string; windowTo: string } => ({
  windowFrom: addDays(plannedOn, -windowBefore),
  windowTo: addDays(plannedOn, windowAfter),
});
