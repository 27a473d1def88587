import { parseAddress } from './address.ts';
import type { CompiledInstrument } from './compiled-instrument.ts';
import { isMissing, type EntryValue, type EntryValues } from './entry-values.ts';

/** An entry as one JSON instance of its schema, with the way back from the instance's pointers to addresses. */
export interface EntryDocument {
  document: Record<string, unknown>;
  /** Pointer in the document → address, where they differ: a missing reading leaves no gap in a list. */
  addressOf: (documentPointer: string) => string;
}

/**
 * Builds the instance that the schema judges. Missing values are left out, rejected readings stay: they were taken.
 * Throws on an address that is none of the instrument's: `operationProblem` refuses those before.
 */
export function toDocument(compiled: CompiledInstrument, values: EntryValues): EntryDocument {
  const document: Record<string, unknown> = {};
  const origins = new Map<string, string>();
  const lists = new Map<string, { index: number; value: EntryValue }[]>();
  for (const [text, value] of Object.entries(values)) {
    const address = parseAddress(text);
    if (!address || !compiled.field(address.pointer))
      throw new Error(`${text} is no address of ${compiled.key}`);
    if (address.rejected || isMissing(value)) continue;
    const { pointer, reading } = address;
    if (reading === undefined) put(document, pointer, value);
    else lists.set(pointer, [...(lists.get(pointer) ?? []), { index: reading, value }]);
  }
  for (const [pointer, list] of lists) {
    list.sort((a, b) => a.index - b.index);
    for (const [at, { index }] of list.entries()) origins.set(`${pointer}/${at}`, `${pointer}/${index}`);
    put(
      document,
      pointer,
      list.map(({ value }) => value),
    );
  }
  return { document, addressOf: (pointer) => origins.get(pointer) ?? pointer };
}

function put(document: Record<string, unknown>, pointer: string, value: unknown): void {
  const path = pointer.slice(1).split('/');
  const leaf = path.pop() ?? '';
  let here = document;
  for (const group of path) here = (here[group] ??= {}) as Record<string, unknown>;
  here[leaf] = value;
}

/** Takes an instance apart into addresses: the inverse of `toDocument` for values that are all there. */
export function toValues(compiled: CompiledInstrument, document: Record<string, unknown>): EntryValues {
  const values: EntryValues = {};
  for (const field of compiled.fields) {
    const value = field.pointer
      .slice(1)
      .split('/')
      .reduce<unknown>(
        (here, name) =>
          typeof here === 'object' && here !== null ? (here as Record<string, unknown>)[name] : undefined,
        document,
      );
    if (value === undefined || value === null) continue;
    if (!field.readings) values[field.pointer] = value as EntryValue;
    else if (Array.isArray(value)) {
      for (const [index, reading] of value.entries()) {
        if (reading !== undefined && reading !== null)
          values[`${field.pointer}/${index}`] = reading as EntryValue;
      }
    }
  }
  return values;
}
