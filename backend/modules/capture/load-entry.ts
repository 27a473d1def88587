import type { EntityManager } from '@mikro-orm/postgresql';
import { currentStudyId } from '#backend/http/actor.ts';
import { assertReadable } from '#backend/http/authorize.ts';
import { publishedInstrument, type PublishedInstrument } from '../instruments/index.ts';
import { EntrySchema, type Entry } from './entry.entity.ts';
import { storedValues, type StoredValue } from './entry-values.ts';
import type { Judged } from './plan-save.ts';

/** An entry with what is needed to show it. */
export interface LoadedEntry {
  entry: Entry;
  instrument: PublishedInstrument;
  stored: StoredValue[];
  /** What a save of this request did not store. */
  refused: Judged[];
}

/** Loads an entry that the actor may know of, with its instrument and present values. */
export async function loadEntry(em: EntityManager, entryId: string): Promise<LoadedEntry> {
  const entry = await em.findOne(EntrySchema, { studyId: currentStudyId(), id: entryId });
  assertReadable('Entry', entry, 'This entry');
  const found = entry as Entry;
  const instrument = await publishedInstrument(em, found.instrumentVersionId);
  const stored = (await storedValues(em, found.studyId, [found])).get(found.id) ?? [];
  return { entry: found, instrument, stored, refused: [] };
}
