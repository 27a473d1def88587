import { expandFields } from '#schemas/instruments/expand-fields.ts';
import type { InstrumentSchema } from '#schemas/instruments/instrument.ts';
import type { FormStore } from './form-store.ts';

/** The fields whose values decide which other fields are asked for. */
export function shapingPointers(schema: InstrumentSchema): string[] {
  const causes = [...expandFields(schema).decidedBy.values()].flatMap((pointers) => [...pointers]);
  return [...new Set(causes)];
}

/**
 * The part of the entry that the form library is given: only what decides the form's shape. All else would make it
 * walk the whole form on each change.
 */
export function shapeOf(store: FormStore, pointers: readonly string[]): Record<string, unknown> {
  const document: Record<string, unknown> = {};
  for (const pointer of pointers) {
    const { value } = store.get(pointer);
    if (value !== undefined) put(document, pointer.slice(1).split('/'), value);
  }
  return document;
}

function put(document: Record<string, unknown>, path: string[], value: unknown): void {
  const [name = '', ...rest] = path;
  if (rest.length === 0) document[name] = value;
  else put((document[name] ??= {}) as Record<string, unknown>, rest, value);
}
