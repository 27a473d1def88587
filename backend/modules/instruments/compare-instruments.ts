import type { DifferenceDto } from '#schemas/api/instruments.ts';
import { compilePublished } from '#schemas/instruments/compile-instrument.ts';
import { expandFields } from '#schemas/instruments/expand-fields.ts';
import type { FieldSchema, InstrumentProblem, InstrumentSchema } from '#schemas/instruments/instrument.ts';
import { compareJson, type JsonChange } from '#schemas/json/compare-json.ts';
import { instrumentLibrary } from './checking/instrument-library.ts';

/**
 * What another version changes, in words: field by field, check by check, and at last what a value now reveals.
 * Both schemas are valid: the published one was checked, the draft has just been.
 */
export function compareInstruments(before: InstrumentSchema, after: InstrumentSchema): DifferenceDto[] {
  const ordered = (path: readonly string[]): boolean => path.at(-1) === 'properties';
  const changes = compareJson(before, after, { ordered });
  return [...changes.map((change) => inWords(change, before, after)), ...revealed(before, after)];
}

/** A field keeps its unit through all versions: another unit is another field (IV-09). */
export function unitProblems(
  earlier: readonly InstrumentSchema[],
  next: InstrumentSchema,
): InstrumentProblem[] {
  const known = new Map<string, string | undefined>();
  for (const schema of earlier) {
    for (const { pointer, schema: field } of expandFields(schema).fields) {
      if (!known.has(pointer)) known.set(pointer, field.unit);
    }
  }
  return expandFields(next).fields.flatMap(({ pointer, schema, schemaPointer }) => {
    if (!known.has(pointer) || known.get(pointer) === schema.unit) return [];
    const unit = known.get(pointer) ?? 'no unit';
    const message = `${pointer} was published with ${unit}: a unit is part of the field, so give the new field a name of its own`;
    return [{ pointer: `${schemaPointer}/unit`, message }];
  });
}

function inWords(change: JsonChange, before: InstrumentSchema, after: InstrumentSchema): DifferenceDto {
  const { subject, aspect } = partOf(change.path, change.kind === 'removed' ? before : after);
  return {
    subject,
    aspect,
    kind: change.kind,
    before: shown(change.before),
    after: shown(change.after),
    breaking: isBreaking(change),
  };
}

/** `properties/systolic/maximum` → the field's label and the words for the keyword. */
function partOf(
  path: readonly string[],
  schema: InstrumentSchema,
): { subject: string; aspect: string | null } {
  const [first, second, ...rest] = path;
  if (first === 'checks' && second !== undefined) return { subject: `Check ${second}`, aspect: words(rest) };
  if (first === '$defs' && second !== undefined)
    return { subject: `Definition ${second}`, aspect: words(rest) };
  let field: FieldSchema = schema;
  let label: string | null = null;
  let at = 0;
  while (path[at] === 'properties' && path[at + 1] !== undefined) {
    const name = path[at + 1] as string;
    field = field.properties?.[name] ?? {};
    label = field.title ?? name;
    at += 2;
  }
  return { subject: label ?? 'The instrument', aspect: words(path.slice(at)) };
}

const words = (path: readonly string[]): string | null =>
  path.length === 0 ? null : path.map((part) => keywordWords[part] ?? part).join(' · ');

const keywordWords: Record<string, string> = {
  title: 'label',
  description: 'help',
  properties: 'order of the fields',
  enum: 'choices',
  choiceLabels: 'words of the choices',
  minimum: 'smallest value',
  maximum: 'largest value',
  exclusiveMinimum: 'value to stay above',
  exclusiveMaximum: 'value to stay below',
  multipleOf: 'step',
  minLength: 'shortest text',
  maxLength: 'longest text',
  required: 'required fields',
  missingReasons: 'reasons for a missing value',
  source: 'verified against source',
  unblinding: 'reveals the condition',
  identifying: 'identifying',
  freeText: 'free text',
  derive: 'how it is computed',
  testCode: 'test code',
};

/** A value as text; a whole field is told by its label, kind and unit. */
function shown(value: unknown): string | null {
  if (value === undefined) return null;
  if (typeof value === 'string') return value;
  const { title, type, unit } = (value ?? {}) as FieldSchema;
  if (typeof title === 'string' && typeof type === 'string') {
    return [title, type, unit].filter((part) => part !== undefined).join(', ');
  }
  return JSON.stringify(value);
}

/** Without the field, or with another kind or unit, earlier values are not values of this field any more. */
function isBreaking({ path, kind }: JsonChange): boolean {
  const inField = path[0] === 'properties';
  if (!inField) return false;
  const last = path.at(-1) ?? '';
  return (
    (kind === 'removed' && path.at(-2) === 'properties') ||
    (kind !== 'added' && (last === 'type' || last === 'unit'))
  );
}

/** Marks spread along derivations and checks: a field may reveal more without a word of its own having changed. */
function revealed(before: InstrumentSchema, after: InstrumentSchema): DifferenceDto[] {
  const [one, other] = [before, after].map((schema) => compilePublished(schema, instrumentLibrary));
  if (one === undefined || other === undefined) return [];
  return other.fields.flatMap((field): DifferenceDto[] => {
    const was = one.field(field.pointer);
    if (was === undefined || was.level === field.level) return [];
    const said = (level: string): string => (level === 'unblinding' ? 'unblinded members only' : 'everyone');
    return [
      {
        subject: field.label,
        aspect: 'who may see it',
        kind: 'changed',
        before: said(was.level),
        after: said(field.level),
        breaking: false,
      },
    ];
  });
}
