import { invalidBody } from '#backend/http/problem.ts';
import type { Site } from '../studies/site.entity.ts';
import { todayAt } from './today-at.ts';

/** A day at the site, today when none is given. @throws Problem 422 for a day to come, or before `earliest` */
export function dayAt(site: Site, day: string | undefined, pointer: string, earliest = '1900-01-01'): string {
  const today = todayAt(site.timeZone);
  const chosen = day ?? today;
  if (chosen > today)
    throw invalidBody([{ pointer, detail: `lies in the future: it is ${today} at the site` }]);
  if (chosen < earliest) throw invalidBody([{ pointer, detail: `lies before the enrolment on ${earliest}` }]);
  return chosen;
}
