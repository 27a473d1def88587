import { missingReasons } from '../vocabulary/missing-reasons.ts';
import { rejectionReasons } from '../vocabulary/rejection-reasons.ts';
import type { CompiledField, CompiledReadings } from './compiled-instrument.ts';
import type { FoundField } from './expand-fields.ts';
import type { FieldSchema, InstrumentProblem, ReadingsRule, Visibility } from './instrument.ts';
import { instrumentLimits } from './limits.ts';

/** Words of CEL and names that every object of the host carries. */
const reservedNames = new Set([
  ...['as', 'break', 'const', 'continue', 'else', 'false', 'for', 'function', 'if', 'import', 'in', 'let'],
  ...['loop', 'namespace', 'null', 'package', 'return', 'true', 'var', 'void', 'while'],
  ...[
    'bool',
    'bytes',
    'cel',
    'double',
    'dyn',
    'google',
    'int',
    'list',
    'map',
    'optional',
    'string',
    'type',
    'uint',
  ],
  ...[
    'constructor',
    'hasOwnProperty',
    'isPrototypeOf',
    'propertyIsEnumerable',
    'toLocaleString',
    'toString',
    'valueOf',
  ],
]);

/** Compiles one field, or says what is wrong with it. `visibility` is its own, not yet spread. */
export function compileField(
  found: FoundField,
  rootUnblinding: boolean,
): { field: CompiledField } | { problems: InstrumentProblem[] } {
  const { schema, pointer, schemaPointer } = found;
  const problems: InstrumentProblem[] = [];
  const refuse = (message: string, keyword = '') =>
    problems.push({ pointer: schemaPointer + (keyword && `/${keyword}`), message });

  if (reservedNames.has(found.name))
    refuse(`${found.name} is a word of the expression language: choose another name`);
  const type = valueType(schema);
  if (!type) refuse(unknownType(schema));
  refuseMisplaced(schema, type, found, refuse);
  if (problems.length > 0 || !type) return { problems };

  const visibility: Visibility = {
    identifying: schema.identifying ?? 'none',
    unblinding: schema.unblinding ?? rootUnblinding,
    freeText: schema.freeText ?? false,
  };
  const element = schema.items ?? schema;
  return {
    field: {
      pointer,
      variable: pointer.slice(1).replaceAll('/', '.'),
      label: schema.title ?? found.name,
      ...(schema.description === undefined ? {} : { description: schema.description }),
      type,
      ...(schema.unit === undefined ? {} : { unit: schema.unit }),
      ...(element.enum ? { choices: choicesOf(element) } : {}),
      ...(schema.format === undefined ? {} : { format: schema.format }),
      ...(schema.readings ? { readings: compileReadings(schema.readings, schema) } : {}),
      required: found.required,
      conditional: found.conditional,
      derived: schema.derive !== undefined,
      source: schema.source ?? false,
      missingReasons: schema.missingReasons ?? missingReasons.map(({ code }) => code),
      ...(schema.testCode === undefined ? {} : { testCode: schema.testCode }),
      visibility,
      level: visibility.unblinding ? 'unblinding' : 'open',
      schemaPointer,
    },
  };
}

function valueType(schema: FieldSchema): CompiledField['type'] | undefined {
  if (schema.type === 'array') {
    if (schema.readings) return schema.items?.type === 'number' ? 'number' : undefined;
    return schema.items?.type === 'string' && schema.items.enum && schema.uniqueItems ? 'choices' : undefined;
  }
  return schema.type === 'object' ? undefined : schema.type;
}

function unknownType(schema: FieldSchema): string {
  if (schema.readings)
    return 'Readings are a list of numbers: write "type": "array", "items": {"type": "number"}';
  if (schema.type === 'array') {
    return 'A list is either readings (add "readings") or several choices ("items" with "enum", and "uniqueItems": true); rows of other kinds are entries of their own';
  }
  return 'The field has no type: write "type": "number", "integer", "string", "boolean" or "array"';
}

function refuseMisplaced(
  schema: FieldSchema,
  type: CompiledField['type'] | undefined,
  found: FoundField,
  refuse: (message: string, keyword?: string) => void,
): void {
  const numeric = type === 'number' || type === 'integer';
  if (numeric && schema.unit === undefined)
    refuse('A number needs a unit: give its UCUM code, or "1" for a plain number');
  if (type && !numeric && schema.unit !== undefined) refuse('Only numbers have a unit', 'unit');
  if (schema.freeText && type !== 'string') refuse('Only text can be free text', 'freeText');
  if (schema.readings && schema.type !== 'array')
    refuse('Readings are a list: write "type": "array"', 'readings');
  if (schema.derive !== undefined && schema.type === 'array')
    refuse('A derived value is one value, not a list', 'derive');
  if (schema.derive !== undefined && found.required) {
    refuse('A derived value cannot be required: require the fields it is computed from', 'derive');
  }
  if (schema.derive !== undefined && schema.source)
    refuse('A derived value has no source: its inputs do', 'source');
  const element = schema.items ?? schema;
  if (element.choiceLabels && element.choiceLabels.length !== element.enum?.length) {
    refuse('There must be as many choiceLabels as values in enum', 'choiceLabels');
  }
  if (schema.readings) refuseReadings(schema.readings, schema, refuse);
}

function refuseReadings(
  rule: ReadingsRule,
  schema: FieldSchema,
  refuse: (message: string, keyword?: string) => void,
): void {
  const counting = rule.count - (rule.discardFirst ?? 0);
  if (counting < 1)
    refuse('All readings are discarded: lower discardFirst or raise count', 'readings/discardFirst');
  if (rule.minimum > counting)
    refuse(`minimum is above the ${counting} readings that can count`, 'readings/minimum');
  if (rule.use !== 'all' && rule.use.last > counting)
    refuse(`last is above the ${counting} readings that can count`, 'readings/use');
  if (schema.maxItems !== undefined && schema.maxItems < rule.count)
    refuse('maxItems is below the number of readings', 'maxItems');
  if (schema.maxItems !== undefined && schema.maxItems > instrumentLimits.readings) {
    refuse(`At most ${instrumentLimits.readings} readings`, 'maxItems');
  }
  if (schema.minItems !== undefined)
    refuse('How many readings are needed is said by readings/minimum', 'minItems');
}

function compileReadings(rule: ReadingsRule, schema: FieldSchema): CompiledReadings {
  const extra = rule.extraIfDiffer ? 1 : 0;
  const replaced = rule.replaceRejected ? rule.count : 0;
  return {
    ...rule,
    discardFirst: rule.discardFirst ?? 0,
    rejectionReasons: rule.rejectionReasons ?? rejectionReasons.map(({ code }) => code),
    most: schema.maxItems ?? Math.min(instrumentLimits.readings, rule.count + extra + replaced),
    partners: [],
  };
}

function choicesOf(schema: FieldSchema): { value: string | number | boolean; label: string }[] {
  return (schema.enum ?? []).map((value, index) => ({
    value,
    label: schema.choiceLabels?.[index] ?? String(value),
  }));
}
