import type { EntityManager } from '@mikro-orm/postgresql';
import type { Entry } from './entry.entity.ts';
import type { Judged } from './plan-save.ts';

/** What later modules do inside the act when values change: marks fall, queries open. */
export interface CaptureListener {
  /** Values at these addresses have changed (or the entry was voided). */
  valuesChanged?: (
    tx: EntityManager,
    entry: Entry,
    addresses: readonly string[],
    because: 'value-changed' | 'voided',
  ) => Promise<void>;
  /** A soft check was confirmed with a reason, and the instrument asks for a query then. */
  checkConfirmed?: (tx: EntityManager, entry: Entry, judged: Judged) => Promise<void>;
}

const listeners: CaptureListener[] = [];

/** Later modules subscribe once, when their routes are declared. */
export function onCapture(listener: CaptureListener): void {
  if (!listeners.includes(listener)) listeners.push(listener);
}

export async function tellValuesChanged(
  tx: EntityManager,
  entry: Entry,
  addresses: readonly string[],
  because: 'value-changed' | 'voided',
): Promise<void> {
  for (const listener of listeners) await listener.valuesChanged?.(tx, entry, addresses, because);
}

export async function tellCheckConfirmed(tx: EntityManager, entry: Entry, judged: Judged): Promise<void> {
  for (const listener of listeners) await listener.checkConfirmed?.(tx, entry, judged);
}
