import type { ExpressionScope } from '../expressions/expression-types.ts';
import type { CompiledField, CompiledInstrument } from './compiled-instrument.ts';
import { isMissing, type EntryValues } from './entry-values.ts';
import { readingsOf, summarise } from './readings.ts';

type Plain = number | string | boolean | number[] | string[];

/** Puts a value under its expression name, in its group if it has one. */
export function putInScope(scope: ExpressionScope, variable: string, value: Plain): void {
  const path = variable.split('.');
  const leaf = path.pop() ?? '';
  let here = scope;
  for (const group of path) here = (here[group] ??= {}) as ExpressionScope;
  here[leaf] = value;
}

/** What an expression sees of a field: its value, or the list of its readings; nothing when there is none. */
export function fieldValue(
  compiled: CompiledInstrument,
  field: CompiledField,
  values: EntryValues,
  which: 'counted' | 'entered' = 'counted',
): Plain | undefined {
  if (field.readings) {
    const { counted, accepted } = readingsOf(compiled, field, values);
    const readings = which === 'entered' ? accepted : counted;
    return readings.length > 0 ? readings.map(({ value }) => value) : undefined;
  }
  const value = values[field.pointer];
  return value === undefined || isMissing(value) || !fits(field, value) ? undefined : value;
}

/** What a library quantity sees of a field: one number. */
export function fieldNumber(
  compiled: CompiledInstrument,
  field: CompiledField,
  values: EntryValues,
): number | undefined {
  if (field.readings) return summarise(field, readingsOf(compiled, field, values).counted);
  const value = values[field.pointer];
  return typeof value === 'number' && Number.isFinite(value) ? value : undefined;
}

/** A value of the wrong kind is refused elsewhere; here it is as if it were not there. */
function fits(field: CompiledField, value: Plain): boolean {
  if (field.type === 'choices') return Array.isArray(value);
  if (field.type === 'integer') return Number.isSafeInteger(value);
  if (field.type === 'number') return Number.isFinite(value);
  return typeof value === field.type;
}
