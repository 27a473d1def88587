import type { ErrorObject, ValidateFunction } from 'ajv';
import { Ajv2020 } from 'ajv/dist/2020.js';
import addFormatsModule from 'ajv-formats';
import type { FieldProblem } from './problem.ts';

const addFormats = addFormatsModule as unknown as (ajv: Ajv2020) => void;

const ajv = new Ajv2020({
  allErrors: true,
  strict: true,
  strictRequired: false,
  allowUnionTypes: true,
  coerceTypes: false,
  removeAdditional: false,
});
addFormats(ajv);

const compiled = new WeakMap<object, ValidateFunction>();

function validatorOf(schema: object): ValidateFunction {
  const known = compiled.get(schema);
  if (known !== undefined) return known;
  const validate = ajv.compile(schema);
  compiled.set(schema, validate);
  return validate;
}

const escaped = (segment: string): string => segment.replaceAll('~', '~0').replaceAll('/', '~1');

function fieldProblem(error: ErrorObject): FieldProblem {
  const { missingProperty, additionalProperty, unevaluatedProperty } = error.params as Record<string, string>;
  const last = missingProperty ?? additionalProperty ?? unevaluatedProperty;
  const pointer = last === undefined ? error.instancePath : `${error.instancePath}/${escaped(last)}`;
  if (missingProperty !== undefined) return { pointer, detail: 'is required' };
  if (additionalProperty !== undefined || unevaluatedProperty !== undefined) {
    return { pointer, detail: 'is not a field of this request; remove it' };
  }
  if (error.keyword === 'enum') {
    return {
      pointer,
      detail: `must be one of ${(error.params as { allowedValues: unknown[] }).allowedValues.join(', ')}`,
    };
  }
  if (error.keyword === 'const') {
    return { pointer, detail: `must be ${String((error.params as { allowedValue: unknown }).allowedValue)}` };
  }
  return { pointer, detail: error.message ?? 'is not valid' };
}

/** All problems of a value against a JSON Schema 2020-12, each at its pointer; empty when it fits. */
export function problemsOf(schema: object, value: unknown): FieldProblem[] {
  const validate = validatorOf(schema);
  return validate(value) ? [] : (validate.errors ?? []).map(fieldProblem);
}

// Characters that XML 1.0 cannot carry, and halves of a surrogate pair: no export could hold them.
// eslint-disable-next-line no-control-regex
const illegal = /[\u0000-\u0008\u000b\u000c\u000e-\u001f\ufffe\uffff]|\p{Surrogate}/u;

/** Texts, names of members included, that hold characters no record can keep. */
export function illegalTexts(value: unknown, pointer = ''): FieldProblem[] {
  if (typeof value === 'string') {
    return illegal.test(value) ? [{ pointer, detail: 'holds a control character; remove it' }] : [];
  }
  if (typeof value !== 'object' || value === null) return [];
  return Object.entries(value).flatMap(([name, member]) => [
    ...(illegal.test(name) ? [{ pointer, detail: 'has a member name with a control character' }] : []),
    ...illegalTexts(member, `${pointer}/${escaped(name)}`),
  ]);
}
