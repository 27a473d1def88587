import type { ErrorObject } from 'ajv';
import { nearestWord } from '#schemas/expressions/nearest-word.ts';
import type { InstrumentProblem } from '#schemas/instruments/instrument.ts';
import { instrumentMetaSchema } from '#schemas/instruments/meta-schema.ts';
import { instrumentAjv } from './instrument-ajv.ts';

/** Keywords of JSON Schema that instruments do without, with what to do instead. */
const unused: Record<string, string> = {
  $anchor: 'refer to "#/$defs/name"',
  $dynamicAnchor: 'write the definition out',
  $dynamicRef: 'write "$ref": "#/$defs/name"',
  $vocabulary: 'leave it out',
  contains: 'write a check',
  contentEncoding: 'upload a source document',
  contentMediaType: 'upload a source document',
  definitions: 'write $defs',
  dependencies: 'write dependentRequired or dependentSchemas',
  deprecated: 'leave the field out of the new version',
  examples: 'give sample values with the draft',
  patternProperties: 'name each field',
  prefixItems: 'name each value as a field of its own',
  propertyNames: 'name each field',
  readOnly: 'derive the value',
  writeOnly: 'leave it out',
};

const validate = instrumentAjv().compile(instrumentMetaSchema);

/** Judges a document against the meta-schema of instruments: each unknown keyword named, at its place (IV-05). */
export function keywordProblems(schema: unknown): InstrumentProblem[] {
  if (validate(schema)) return [];
  // A misspelt keyword comes first: what is missing is often only misspelt.
  const errors = [...(validate.errors ?? [])].sort((a, b) => rank(a) - rank(b));
  const problems = errors.flatMap((error) => explain(error, schema));
  // Several keywords of the meta-schema may refuse one place: the first says enough.
  return [...new Map(problems.map((problem) => [problem.pointer, problem])).values()];
}

function rank({ keyword }: ErrorObject): number {
  return keyword === 'additionalProperties' ? 0 : 1;
}

function explain(error: ErrorObject, schema: unknown): InstrumentProblem[] {
  const {
    keyword,
    instancePath: pointer,
    params,
  } = error as ErrorObject & { params: Record<string, unknown> };
  const value = valueAt(schema, pointer);
  const last = pointer.split('/').at(-1) ?? '';
  switch (keyword) {
    case 'additionalProperties': {
      const name = String(params.additionalProperty);
      return [
        { pointer: `${pointer}/${escapePointer(name)}`, message: unknownKeyword(name, error.schemaPath) },
      ];
    }
    case 'required':
      return [{ pointer, message: `"${String(params.missingProperty)}" is missing` }];
    case 'propertyNames':
      return [
        {
          pointer,
          message: `${String(params.propertyName)} is no name for a field: write it like meanPressure (letters and digits, at most 40)`,
        },
      ];
    case 'pattern':
    case 'minLength':
    case 'maxLength':
      // The name itself was refused under `propertyNames`.
      if (error.propertyName !== undefined) return [];
      return [{ pointer, message: badText(last, value, error) }];
    case 'const':
      return [{ pointer, message: badConst(last, params.allowedValue) }];
    case 'enum':
      if (last === 'identifying' && value === 'direct') {
        return [
          {
            pointer,
            message:
              'Direct identifiers (names, birth dates, contact details) are kept apart: enter them in the participant’s identifier form and leave this field out',
          },
        ];
      }
      if (last === 'format')
        return [
          {
            pointer,
            message: `There is no format ${String(value)} here: write date or date-time, or give a pattern`,
          },
        ];
      return [{ pointer, message: `Write one of ${(params.allowedValues as unknown[]).join(', ')}` }];
    case 'anyOf':
      return last === 'derive' || last === 'use' || pointer.includes('/derive/inputs/')
        ? [{ pointer, message: anyOfWords(last) }]
        : [];
    default:
      return [{ pointer, message: `${last || 'The document'} ${error.message ?? 'is not as it must be'}` }];
  }
}

function unknownKeyword(name: string, schemaPath: string): string {
  const remedy = Object.hasOwn(unused, name) ? unused[name] : undefined;
  if (remedy !== undefined) return `${name} is not used in instruments: ${remedy}`;
  const nearest = nearestWord(name, knownWords(schemaPath));
  return nearest
    ? `${name} is not a keyword: did you mean ${nearest}?`
    : `${name} is not a keyword of instruments`;
}

function knownWords(schemaPath: string): string[] {
  const { readings, check } = instrumentMetaSchema.$defs;
  if (schemaPath.startsWith('#/$defs/readings')) return Object.keys(readings.properties);
  if (schemaPath.startsWith('#/$defs/check')) return Object.keys(check.properties);
  return Object.keys(instrumentMetaSchema.properties);
}

function badText(keyword: string, value: unknown, error: ErrorObject): string {
  if (keyword === '$ref') return 'References stay inside the document: write "#/$defs/name"';
  if (keyword === 'testCode')
    return `${String(value)} is no test code: at most eight capitals, digits and underscores, no digit first`;
  if (keyword === 'instrumentKey' || keyword === 'id')
    return `${String(value)} must be in small letters with hyphens, such as resting-pressures`;
  return `${keyword} ${error.message ?? 'is not as it must be'}`;
}

function badConst(keyword: string, allowed: unknown): string {
  if (keyword === '$schema') return `Instruments are JSON Schema 2020-12: write "${String(allowed)}"`;
  return `${keyword} must be ${JSON.stringify(allowed)}`;
}

function anyOfWords(keyword: string): string {
  if (keyword === 'derive') return 'Write an expression, or {"quantity": …, "inputs": {…}}';
  if (keyword === 'use') return 'Write "all", or {"last": n}';
  return 'An input is the address of a field, such as "/systolic", or a constant {"value": …, "unit": …}';
}

function valueAt(schema: unknown, pointer: string): unknown {
  return pointer
    .split('/')
    .slice(1)
    .map((part) => part.replaceAll('~1', '/').replaceAll('~0', '~'))
    .reduce<unknown>(
      (here, part) =>
        typeof here === 'object' && here !== null ? (here as Record<string, unknown>)[part] : undefined,
      schema,
    );
}

function escapePointer(name: string): string {
  return name.replaceAll('~', '~0').replaceAll('/', '~1');
}
