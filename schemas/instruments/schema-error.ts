import { shownUnit } from '../vocabulary/units.ts';
import type { CompiledField, CompiledInstrument } from './compiled-instrument.ts';
import type { Finding } from './check-values.ts';

/** What is read of a validator's error; the browser's and the server's have the same form. */
export interface SchemaError {
  keyword: string;
  instancePath: string;
  params: Record<string, unknown>;
}

/**
 * Turns a validator's error into the sentence that form and API both show (IV-08, DE-05).
 * Nothing for errors that only repeat another one (`must match "then" schema`).
 *
 * @param addressOf document pointer → address, from `toDocument`
 */
export function describeSchemaError(
  compiled: CompiledInstrument,
  error: SchemaError,
  addressOf: (pointer: string) => string = (pointer) => pointer,
): Finding | undefined {
  if (error.keyword === 'if') return undefined;
  const missing = error.keyword === 'required' || error.keyword === 'dependentRequired';
  const at = addressOf(error.instancePath) + (missing ? `/${String(error.params.missingProperty)}` : '');
  const field = compiled.field(at) ?? compiled.field(at.replace(/\/\d+$/, ''));
  const reading = /\/(\d+)$/.exec(at)?.[1];
  const anyHidden = compiled.fields.some(({ level }) => level === 'unblinding');
  return {
    checkId: missing ? 'required' : 'schema',
    severity: 'hard',
    pointers: [at],
    message: field ? fieldSentence(field, reading, error) : entrySentence(error),
    // An error that belongs to no field may come from any of them.
    level: field ? field.level : anyHidden ? 'unblinding' : 'open',
    opensQuery: false,
  };
}

function fieldSentence(
  field: CompiledField,
  reading: string | undefined,
  { keyword, params }: SchemaError,
): string {
  const name = reading === undefined ? field.label : `${field.label}, reading ${Number(reading) + 1}`;
  const limit = withUnit(params.limit, field.unit);
  switch (keyword) {
    case 'required':
    case 'dependentRequired':
      return `${field.label} is empty: give a value, or the reason why there is none`;
    case 'type':
      return `${name} must be ${kindWords[String(params.type)] ?? String(params.type)}`;
    case 'minimum':
      return `${name} must be at least ${limit}`;
    case 'exclusiveMinimum':
      return `${name} must be above ${limit}`;
    case 'maximum':
      return `${name} must be at most ${limit}`;
    case 'exclusiveMaximum':
      return `${name} must be below ${limit}`;
    case 'multipleOf':
      return `${name} must be in steps of ${withUnit(params.multipleOf, field.unit)}`;
    case 'enum':
      return `${name} must be one of: ${(field.choices ?? []).map(({ label }) => label).join(', ')}`;
    case 'const':
      return `${name} must be ${params.allowedValue === true ? 'yes' : String(params.allowedValue)}`;
    case 'format':
      return `${name} must be a ${params.format === 'date' ? 'day of the calendar, such as 2026-03-31' : 'day and time, such as 2026-03-31T09:05:00Z'}`;
    case 'pattern':
      return `${name} is not written as asked${field.description === undefined ? '' : `: ${field.description}`}`;
    case 'minLength':
      return `${name} must have at least ${String(params.limit)} characters`;
    case 'maxLength':
      return `${name} must have at most ${String(params.limit)} characters`;
    case 'minItems':
      return `${name} must have at least ${String(params.limit)} values`;
    case 'maxItems':
      return `${name} must have at most ${String(params.limit)} values`;
    case 'uniqueItems':
      return `${name} names a choice twice`;
    default:
      return `${name} does not fit the rule "${keyword}" of its instrument`;
  }
}

function entrySentence({ keyword, params }: SchemaError): string {
  const extra = params.additionalProperty ?? params.unevaluatedProperty;
  if (typeof extra === 'string') return `There is no field ${extra}`;
  return `The values together do not fit the rule "${keyword}" of the instrument`;
}

const kindWords: Record<string, string> = {
  number: 'a number',
  integer: 'a whole number',
  string: 'text',
  boolean: 'yes or no',
  array: 'a list',
  object: 'a group of fields',
};

/** A limit as stored and, where it is read in another form, as shown: `0.75 L/L (75 %)`. */
function withUnit(limit: unknown, unit: string | undefined): string {
  const number = Number(limit);
  if (unit === undefined || unit === '1') return String(number);
  const { shown, factor } = shownUnit(unit);
  if (factor === 1) return `${number} ${shown}`;
  return `${number} ${unit} (${Number((number * factor).toPrecision(12))} ${shown})`;
}
