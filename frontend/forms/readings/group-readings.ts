import type { CompiledField } from '#schemas/instruments/compiled-instrument.ts';

/** More lines in one grid are hard to follow with a finger on the sheet. */
const widest = 8;

/**
 * Puts fields whose readings are taken side by side into one grid: those read in one act, and neighbours with the
 * same unit and number of readings, as both arms.
 */
export function groupReadings(fields: readonly CompiledField[]): CompiledField[][] {
  const groups: CompiledField[][] = [];
  for (const field of fields) {
    const last = groups.at(-1);
    if (last && last.length < widest && belongs(field, last[0]!)) last.push(field);
    else groups.push([field]);
  }
  return groups;
}

function belongs(field: CompiledField, first: CompiledField): boolean {
  const [one, other] = [field.readings, first.readings];
  if (!one || !other || one.count !== other.count) return false;
  if (one.together !== undefined || other.together !== undefined) return one.together === other.together;
  return field.unit === first.unit;
}

/** A few readings of several fields read like the sheet they come from; many readings run across. */
export const readingsRunAcross = (fields: readonly CompiledField[]): boolean =>
  fields.length === 1 || (fields[0]?.readings?.count ?? 0) > 4;
