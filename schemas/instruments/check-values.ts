import type { ExpressionScope } from '../expressions/expression-types.ts';
import type { Level } from '../vocabulary/states.ts';
import type { CompiledCheck, CompiledField, CompiledInstrument } from './compiled-instrument.ts';
import { isMissing, type EntryValues } from './entry-values.ts';
import { readingsOf } from './readings.ts';
import { fieldValue, putInScope } from './scope.ts';

/** What a check found: where it stands, what it says, and who may see it. */
export interface Finding {
  /** The check's id, or `required`, `readings`, `extra-reading` from the instrument's own rules. */
  checkId: string;
  /** `hard` refuses, `soft` asks for a confirmation with a reason. */
  severity: 'hard' | 'soft';
  pointers: string[];
  message: string;
  level: Level;
  opensQuery: boolean;
}

/**
 * Runs the checks whose fields are filled in; on completion also asks for required fields and readings.
 * Types and limits of single values are the schema's own and are judged by its validator.
 *
 * @param values what was entered together with what was derived (`withDerived`)
 */
export function checkValues(
  compiled: CompiledInstrument,
  values: EntryValues,
  { stage }: { stage: 'open' | 'complete' },
): Finding[] {
  const found = compiled.checks.flatMap((check) => runCheck(compiled, check, values, stage) ?? []);
  if (stage === 'open') return found;
  return [...compiled.fields.flatMap((field) => incomplete(compiled, field, values)), ...found];
}

function runCheck(
  compiled: CompiledInstrument,
  check: CompiledCheck,
  values: EntryValues,
  stage: 'open' | 'complete',
): Finding | undefined {
  const scope: ExpressionScope = {};
  for (const pointer of check.inputs) {
    const field = compiled.field(pointer);
    const value = field && fieldValue(compiled, field, values, check.readings);
    if (value === undefined) return undefined;
    putInScope(scope, field?.variable ?? '', value);
  }
  const { id: checkId, severity, pointers, message, level, opensQuery } = check;
  const result = check.expression.evaluate(scope);
  if ('value' in result) {
    return result.value === true ? undefined : { checkId, severity, pointers, message, level, opensQuery };
  }
  // While readings come in an expression may not have all it needs; a completed entry must not pass unchecked.
  if (stage === 'open') return undefined;
  return {
    checkId,
    severity: 'soft',
    pointers,
    message: `Could not be checked (${result.problem}): ${message}`,
    level,
    opensQuery,
  };
}

function incomplete(compiled: CompiledInstrument, field: CompiledField, values: EntryValues): Finding[] {
  if (field.derived) return [];
  const finding = (checkId: string, severity: 'hard' | 'soft', message: string): Finding => ({
    checkId,
    severity,
    pointers: [field.pointer],
    message,
    level: field.level,
    opensQuery: false,
  });
  const empty = finding(
    'required',
    'hard',
    `${field.label} is empty: give a value, or the reason why there is none`,
  );
  const declaredMissing = isMissing(values[field.pointer]);
  if (!field.readings) {
    if (declaredMissing) return [];
    const value = values[field.pointer];
    return field.required && (value === undefined || value === '') ? [empty] : [];
  }
  const { accepted, counted, rejected, missing, expected, extraAsked } = readingsOf(compiled, field, values);
  const untouched = accepted.length + rejected.length + missing.length === 0;
  if (declaredMissing && accepted.length > 0) {
    return [
      finding(
        'readings',
        'hard',
        `${field.label} has readings and a reason why there are none: take one of them away`,
      ),
    ];
  }
  if (declaredMissing) return [];
  if (untouched) return field.required ? [empty] : [];
  const { minimum } = field.readings;
  if (counted.length < minimum) {
    const message = `${field.label}: ${counted.length} readings count, at least ${minimum} are needed. Take another, or give the reason why the value is missing`;
    return [finding('readings', 'hard', message)];
  }
  const taken = accepted.length + rejected.length + missing.length;
  if (extraAsked && taken < expected) {
    const by = field.readings.extraIfDiffer?.by;
    const rule =
      by === undefined
        ? 'that is read with it differs'
        : `differs by more than ${by} ${field.unit ?? ''}`.trim();
    return [
      finding('extra-reading', 'soft', `${field.label}: the last reading ${rule}, so one more is asked for`),
    ];
  }
  return [];
}
