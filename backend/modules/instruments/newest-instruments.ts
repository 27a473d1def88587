import type { EntityManager } from '@mikro-orm/postgresql';
import { publishedInstrument, type PublishedInstrument } from './published-instrument.ts';

/** The newest published version of every instrument of a study, compiled, by key. */
export async function newestInstruments(
  em: EntityManager,
  studyId: string,
): Promise<Map<string, PublishedInstrument>> {
  const newest = await em.execute<{ id: string; key: string }[]>(
    'select distinct on (key) id, key from instrument_version where study_id = ? order by key, version desc',
    [studyId],
  );
  const compiled = new Map<string, PublishedInstrument>();
  for (const { key, id } of newest) compiled.set(key, await publishedInstrument(em, id));
  return compiled;
}
