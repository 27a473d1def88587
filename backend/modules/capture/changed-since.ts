import type { EntityManager } from '@mikro-orm/postgresql';
import { assertRevision } from '#backend/http/preconditions.ts';
import type { HiddenValue, ValueDto } from '#schemas/api/capture.ts';
import type { LoadedEntry } from './load-entry.ts';
import { presentValue } from './present-value.ts';

/** What others stored at an address after the revision that was seen: both values can be put side by side (DE-02). */
interface ChangedSince {
  address: string;
  revision: number;
  by: string;
  at: string;
  present: ValueDto | HiddenValue | null;
}

interface Row {
  address: string;
  revision: number;
  by: string | null;
  at: string;
}

/** Addresses that moved since `seen`, each with who moved it last and what lies there now. */
async function changedSince(em: EntityManager, loaded: LoadedEntry, seen: number): Promise<ChangedSince[]> {
  const { entry, stored, instrument } = loaded;
  const rows = await em.execute<Row[]>(
    `select distinct on (change.key) change.key as address, revision.revision, person.name as by,
            to_char(event.at at time zone 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"') as at
       from entry_revision as revision
       join audit_event as event on event.study_id = revision.study_id and event.sequence = revision.sequence
       left join person on person.id = event.actor_id
      cross join lateral jsonb_each(revision.changes) as change
      where revision.study_id = ? and revision.entry_id = ? and revision.revision > ?
      order by change.key, revision.revision desc`,
    [entry.studyId, entry.id, seen],
  );
  const byAddress = new Map(stored.map((value) => [value.address, value]));
  return rows
    .filter(({ address }) => instrument.compiled.field(address)?.derived !== true)
    .map(({ address, revision, by, at }) => {
      const value = byAddress.get(address);
      return {
        address,
        revision,
        by: by ?? 'the system',
        at,
        present: value === undefined ? null : presentValue(instrument.compiled, value),
      };
    });
}

/** 412 unless the entry is still at the revision that was seen, with what has moved since. */
export async function assertFresh(em: EntityManager, loaded: LoadedEntry, seen: number): Promise<void> {
  if (loaded.entry.revision === seen) return;
  assertRevision(loaded.entry, seen, { changed: await changedSince(em, loaded, seen) });
}
