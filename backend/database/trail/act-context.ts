import { AsyncLocalStorage } from 'node:async_hooks';
import type { ChangeSet } from '@mikro-orm/postgresql';
import type { EventChange } from './event-form.ts';
import type { RecordedValue } from './recorded-value.ts';

/** One revision of an entry: what changed at which address, and the hash of the whole content after it. */
export interface EntryRevision {
  entryId: string;
  revision: number;
  contentHash: string;
  changes: Record<string, { value: string; commitment: string } | null>;
}

/** What an act has gathered so far. */
export interface ActContext {
  changeSets: ChangeSet<object>[];
  changes: EventChange[];
  values: RecordedValue[];
  revisions: EntryRevision[];
  /** Set once the event is being written: nothing may change after it. */
  sealed: boolean;
}

const storage = new AsyncLocalStorage<ActContext>();

export const currentAct = (): ActContext | undefined => storage.getStore();

export const withinAct = <T>(context: ActContext, work: () => Promise<T>): Promise<T> =>
  storage.run(context, work);

function openAct(): ActContext {
  const context = storage.getStore();
  if (context === undefined || context.sealed) throw new Error('Values are recorded inside act() only.');
  return context;
}

/** Records a value at an address inside the running act; `old` is the commitment it takes the place of. */
export function recordChange(value: RecordedValue, old: string | null): void {
  const context = openAct();
  context.values.push(value);
  context.changes.push({
    subject: `${value.subjectType}/${value.subjectId}`,
    address: value.address,
    old,
    new: value.commitment,
  });
}

/** Adds an entry's revision to the running act. */
export function recordRevision(revision: EntryRevision): void {
  openAct().revisions.push(revision);
}
