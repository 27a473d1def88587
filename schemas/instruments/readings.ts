import { mean, median } from '../expressions/function-bodies.ts';
import type { CompiledField, CompiledInstrument } from './compiled-instrument.ts';
import { isMissing, type EntryValues } from './entry-values.ts';

/** One reading that was taken and not set aside. */
export interface Reading {
  index: number;
  value: number;
}

/** The readings of a field as its rule sees them. */
export interface ReadingsState {
  /** Entered, not rejected, and so in all fields read in the same act. */
  accepted: Reading[];
  /** Of these, the ones that count. */
  counted: Reading[];
  rejected: number[];
  /** Readings for which a reason was given instead of a number. */
  missing: number[];
  /** How many boxes to show now: the planned ones, replacements for rejected ones, one more if the last two differ. */
  expected: number;
  /** The last two planned ones differ by more than the rule allows. */
  extraAsked: boolean;
}

/** Applies the rule of a field of readings to what was entered. */
export function readingsOf(
  compiled: CompiledInstrument,
  field: CompiledField,
  values: EntryValues,
): ReadingsState {
  const rule = field.readings;
  if (!rule) throw new Error(`${field.pointer} has no readings`);
  const accepted: Reading[] = [];
  const rejected: number[] = [];
  const missing: number[] = [];
  for (let index = 0; index < rule.most; index += 1) {
    const state = readingState(rule.partners, index, values);
    const value = values[`${field.pointer}/${index}`];
    if (state === 'rejected') rejected.push(index);
    else if (state === 'missing') missing.push(index);
    else if (state === 'complete' && typeof value === 'number') accepted.push({ index, value });
  }
  const eligible = accepted.filter(({ index }) => index >= rule.discardFirst);
  const counted = rule.use === 'all' ? eligible : eligible.slice(-rule.use.last);
  const planned = rule.count - rule.discardFirst;
  const extraAsked = rule.partners.some((pointer) =>
    differs(compiled.field(pointer), eligible.slice(0, planned), planned, values),
  );
  const replacements = rule.replaceRejected
    ? rejected.filter((index) => index >= rule.discardFirst).length
    : 0;
  const expected = Math.min(rule.most, rule.count + replacements + (extraAsked ? 1 : 0));
  return { accepted, counted, rejected, missing, expected, extraAsked };
}

/** The one value that the counted readings stand for; nothing when none counts. */
export function summarise(field: CompiledField, counted: Reading[]): number | undefined {
  if (counted.length === 0) return undefined;
  const values = counted.map(({ value }) => value);
  return field.readings?.summary === 'median' ? median(values) : mean(values);
}

function readingState(
  partners: string[],
  index: number,
  values: EntryValues,
): 'empty' | 'complete' | 'missing' | 'rejected' {
  const addresses = partners.map((pointer) => `${pointer}/${index}`);
  if (addresses.some((address) => values[`${address}!rejected`] !== undefined)) return 'rejected';
  if (addresses.some((address) => isMissing(values[address]))) return 'missing';
  return addresses.every((address) => typeof values[address] === 'number') ? 'complete' : 'empty';
}

function differs(
  field: CompiledField | undefined,
  eligible: Reading[],
  planned: number,
  values: EntryValues,
): boolean {
  const by = field?.readings?.extraIfDiffer?.by;
  const [last, before] = [eligible.at(-1), eligible.at(-2)];
  if (!field || by === undefined || !last || !before || eligible.length < planned) return false;
  const [a, b] = [last, before].map(({ index }) => Number(values[`${field.pointer}/${index}`])) as [
    number,
    number,
  ];
  // 0.45 and 0.44 are written 0.01 apart, and are a little more than that in binary.
  return Math.abs(a - b) > by * (1 + 1e-9);
}
