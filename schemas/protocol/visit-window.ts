/** A visit's target and window as days of the calendar. */
export interface VisitWindow {
  target: string;
  earliest: string;
  latest: string;
}

/** Whether a text is a day of the calendar, written YYYY-MM-DD. */
export function isCalendarDay(text: string): boolean {
  const parts = /^(\d{4})-(\d{2})-(\d{2})$/.exec(text);
  if (!parts) return false;
  return writeDay(Date.UTC(Number(parts[1]), Number(parts[2]) - 1, Number(parts[3]))) === text;
}

/** The day so many days later; days are counted on the calendar, so that no clock change can shift one. */
export function addDays(day: string, days: number): string {
  return writeDay((dayNumber(day) + days) * millisecondsPerDay);
}

/** Days from one day of the calendar to another; negative when the other is earlier. */
export function daysBetween(from: string, to: string): number {
  return dayNumber(to) - dayNumber(from);
}

/**
 * The study day of a date. Day 1 is the day of reference, the day before it is day -1: there is no day 0.
 *
 * Source   CDISC SDTM, rule for study day variables (--DY); from memory
 */
export function studyDay(date: string, dayOne: string): number {
  const distance = daysBetween(dayOne, date);
  return distance < 0 ? distance : distance + 1;
}

/** The date of a study day: the inverse of `studyDay`. */
export function dateOfStudyDay(day: number, dayOne: string): string {
  if (!Number.isInteger(day) || day === 0)
    throw new RangeError(`A study day is a whole number other than 0, not ${day}`);
  return addDays(dayOne, day < 0 ? day : day - 1);
}

/** Target and window of a visit for a participant whose day 1 is known. */
export function visitWindow(
  { targetDay, windowBefore, windowAfter }: { targetDay: number; windowBefore: number; windowAfter: number },
  dayOne: string,
): VisitWindow {
  const target = dateOfStudyDay(targetDay, dayOne);
  return { target, earliest: addDays(target, -windowBefore), latest: addDays(target, windowAfter) };
}

/** How many days a date lies outside a window: negative before it, positive after it, 0 within. */
export function daysOutside({ earliest, latest }: VisitWindow, date: string): number {
  return Math.min(0, daysBetween(earliest, date)) + Math.max(0, daysBetween(latest, date));
}

const millisecondsPerDay = 86_400_000;

function dayNumber(day: string): number {
  if (!isCalendarDay(day)) throw new RangeError(`${day} is no day of the calendar (YYYY-MM-DD)`);
  return Date.parse(`${day}T00:00:00Z`) / millisecondsPerDay;
}

function writeDay(time: number): string {
  return new Date(time).toISOString().slice(0, 10);
}
