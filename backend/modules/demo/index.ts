import type { Deps } from '#backend/http/deps.ts';
import { PersonSchema } from '../accounts/person.entity.ts';
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
  if ((await deps.orm.em.fork().count(PersonSchema, {})) > 0) return false;
  const people = await makePeople(deps);
  await cast(deps, people.get('ada.quill'), 'administrator', null);
  await seedReedgrip(deps, people, report);
  await seedScreepath(deps, people, report);
  return true;
}
