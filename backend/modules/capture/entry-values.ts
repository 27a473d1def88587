import type { EntityManager } from '@mikro-orm/postgresql';
import type { CompiledInstrument } from '#schemas/instruments/compiled-instrument.ts';
import type { EntryValue, EntryValues } from '#schemas/instruments/entry-values.ts';
import type { Derivation } from '#backend/database/trail/recorded-value.ts';
import type { Entry } from './entry.entity.ts';

/** A value as it lies at an address now, with what it was computed from. */
export interface StoredValue {
  id: string;
  address: string;
  value: EntryValue | null;
  written: string | null;
  derivation: Derivation | null;
  redacted: boolean;
}

interface Row {
  id: string;
  address: string;
  value: EntryValue | null;
  written: string | null;
  derivation: Derivation | null;
  redacted_at: string | null;
}

/** The present values of entries, by entry id; one statement for all of them. */
export async function storedValues(
  em: EntityManager,
  studyId: string,
  entries: readonly Pick<Entry, 'id' | 'content'>[],
): Promise<Map<string, StoredValue[]>> {
  const ids = entries.flatMap(({ content }) => Object.values(content).map(({ value }) => value));
  const rows =
    ids.length === 0
      ? []
      : await em.execute<Row[]>(
          `select id, address, value, written, derivation, redacted_at from recorded_value
            where study_id = ? and id = any(?::uuid[])`,
          [studyId, `{${ids.join(',')}}`],
        );
  const byId = new Map(rows.map((row) => [row.id, row]));
  return new Map(
    entries.map(({ id, content }) => [
      id,
      Object.entries(content).flatMap(([address, item]) => {
        const row = byId.get(item.value);
        if (row === undefined) return [];
        const { value, written, derivation, redacted_at: redactedAt } = row;
        return [{ id: item.value, address, value, written, derivation, redacted: redactedAt !== null }];
      }),
    ]),
  );
}

/** What instruments compute with: addresses and values, without what was redacted. */
export function entryValues(stored: readonly StoredValue[]): EntryValues {
  const values: EntryValues = {};
  for (const { address, value, redacted } of stored) {
    if (value !== null && !redacted) values[address] = value;
  }
  return values;
}

/** What was entered, without what is computed from it. */
export function enteredValues(compiled: CompiledInstrument, stored: readonly StoredValue[]): EntryValues {
  return entryValues(stored.filter(({ address }) => compiled.field(address)?.derived !== true));
}
