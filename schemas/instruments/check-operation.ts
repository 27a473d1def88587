import { parseAddress } from './address.ts';
import type { CompiledField, CompiledInstrument } from './compiled-instrument.ts';
import { isMissing, type EntryValue } from './entry-values.ts';

/**
 * Why one change cannot be made to an entry: an address or a kind of value that its instrument does not have.
 * Limits are judged by the schema's validator, rules over several fields by `checkValues`.
 *
 * @param value `null` takes away what is there
 * @returns a sentence for the person at the screen; nothing when the change can be made
 */
export function operationProblem(
  compiled: CompiledInstrument,
  text: string,
  value: EntryValue | null,
): string | undefined {
  const address = parseAddress(text);
  const field = address && compiled.field(address.pointer);
  if (!address || !field) return `${compiled.title} has no field ${text}`;
  const { reading, rejected } = address;
  if (field.derived) return `${field.label} is computed: change the fields it comes from`;
  if (reading !== undefined && !field.readings) return `${field.label} is one value, not a row of readings`;
  if (reading !== undefined && field.readings && reading >= field.readings.most) {
    return `${field.label} has at most ${field.readings.most} readings`;
  }
  if (value === null) return undefined;
  if (rejected) return rejectionProblem(field, value);
  if (isMissing(value)) {
    if (field.missingReasons.includes(value.missing)) return undefined;
    return `${field.label}: "${value.missing}" is not one of its reasons (${field.missingReasons.join(', ')})`;
  }
  if (field.readings && reading === undefined)
    return `${field.label} is a row of readings: give each by itself`;
  return kindProblem(field, value);
}

function rejectionProblem(field: CompiledField, value: EntryValue): string | undefined {
  const reasons = field.readings?.rejectionReasons ?? [];
  if (typeof value === 'string' && reasons.includes(value)) return undefined;
  return `${field.label}: a reading is set aside for one of these reasons: ${reasons.join(', ')}`;
}

function kindProblem(
  field: CompiledField,
  value: Exclude<EntryValue, { missing: string }>,
): string | undefined {
  switch (field.type) {
    case 'number':
      return typeof value === 'number' && Number.isFinite(value)
        ? undefined
        : `${field.label} must be a number`;
    case 'integer':
      return Number.isSafeInteger(value) ? undefined : `${field.label} must be a whole number`;
    case 'boolean':
      return typeof value === 'boolean' ? undefined : `${field.label} must be yes or no`;
    case 'choices':
      return Array.isArray(value) && value.length > 0
        ? undefined
        : `${field.label} must be one or more of its choices`;
    case 'string':
      if (typeof value !== 'string') return `${field.label} must be text`;
      // An empty text would be a missing value in disguise (DE-06); control characters have no place in XML (XC-01).
      if (value.trim() === '')
        return `${field.label} is blank: give a value, or the reason why there is none`;
      return hasControlCharacter(value) ? `${field.label} holds a character that cannot be kept` : undefined;
  }
}

function hasControlCharacter(text: string): boolean {
  for (const character of text) {
    const code = character.codePointAt(0) ?? 0;
    const allowed =
      code === 9 || code === 10 || code === 13 || (code >= 32 && code !== 0xfffe && code !== 0xffff);
    if (!allowed || (code >= 0xd800 && code <= 0xdfff)) return true;
  }
  return false;
}
