import type { Deps } from '#backend/http/deps.ts';
import { PersonSchema } from '../accounts/person.entity.ts';
import { ExportRequestSchema } from '../exports/export-request.entity.ts';
import { cast, makePeople } from './cast.ts';
import { seedReedgrip } from './reedgrip.ts';
import { seedScreepath } from './screepath.ts';

/**
 * Fills an empty system with two invented studies, through the same acts as real use; a worker must be running.
 * A system that has anybody in it is left alone.
 */
export async function seedDemo(
  deps: Deps,
  report: (text: string) => void = () => undefined,
): Promise<boolean> {
  const em = deps.orm.em.fork();
  if ((await em.count(PersonSchema, {})) > 0) {
    // The export is the last thing that the demo makes.
    if ((await em.count(ExportRequestSchema, {})) === 0) {
      report(
        'The demo looks unfinished: a start was stopped while making it. Remove the data folder for a whole one.',
      );
    }
    return false;
  }
  const people = await makePeople(deps);
  await cast(deps, people.get('ada.quill'), 'administrator', null);
  await seedReedgrip(deps, people, report);
  await seedScreepath(deps, people, report);
  return true;
}
