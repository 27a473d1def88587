import { invalidPlan } from './analysis-error.ts';
import { methodNames, type MethodName, type Plan } from './plan.ts';
import { methodRules, planFields, settledFields, type FieldSchema } from './plan-schema.ts';

/**
 * The plan with its defaults, or AnalysisError invalid_plan that names the field and what it has to be.
 *
 * Checks the same as `planSchema`: method, fields known, their types, what the method requires, number of levels.
 * A single text or number is taken for a list of one, as some writers of JSON leave out the brackets.
 */
export function validatePlan(given: unknown): Plan {
  if (!isObject(given)) throw invalidPlan('The plan has to be a JSON object.');
  const input = normalised(given);
  const method = input['method'];
  if (!isMethodName(method)) throw invalidPlan(`"method" has to be one of ${methodNames.join(', ')}.`);
  for (const [field, value] of Object.entries(input)) {
    if (!Object.hasOwn(planFields, field))
      throw invalidPlan(`The plan has no field "${field}". Check its spelling.`);
    checkValue(field, value, planFields[field as keyof Plan]);
  }
  const rule = methodRules[method];
  for (const field of rule.required) {
    if (input[field] === undefined) throw invalidPlan(`The method ${method} needs "${field}".`);
  }
  for (const [field, [least, most]] of Object.entries(rule.counts ?? {})) {
    const list = input[field];
    if (Array.isArray(list) && (list.length < least || list.length > most)) {
      throw invalidPlan(
        `The method ${method} needs ${countText(least, most)} in "${field}", not ${list.length}.`,
      );
    }
  }
  for (const [field, value] of Object.entries(settledFields(method))) {
    if (input[field] !== undefined && input[field] !== value) {
      throw invalidPlan(`The method ${method} takes "${field}" only as ${value}.`);
    }
  }
  return { ...defaults, ...input } as unknown as Plan;
}

/** Lone values as lists; what is undefined is not there. */
function normalised(input: Record<string, unknown>): Record<string, unknown> {
  const isLone = (field: string, value: unknown) =>
    Object.hasOwn(planFields, field) &&
    planFields[field as keyof Plan].type === 'array' &&
    (typeof value === 'string' || typeof value === 'number');
  return Object.fromEntries(
    Object.entries(input)
      .filter(([, value]) => value !== undefined)
      .map(([field, value]) => [field, isLone(field, value) ? [value] : value]),
  );
}

const defaults = Object.fromEntries(
  Object.entries(planFields).flatMap(([field, { default: value }]) =>
    value === undefined ? [] : [[field, value]],
  ),
);

function checkValue(path: string, value: unknown, schema: FieldSchema): void {
  const fault = faultOf(value, schema);
  if (fault !== null) throw invalidPlan(`"${path}" has to be ${fault}.`);
  if (Array.isArray(value) && schema.items) {
    const { items } = schema;
    value.forEach((item, index) => {
      const place = `${path}[${index}]`;
      if (!('anyOf' in items)) checkValue(place, item, items);
      else {
        const match = items.anyOf.find((option) => hasType(item, option.type));
        if (!match) throw invalidPlan(`"${place}" has to be a column or a list of columns.`);
        checkValue(place, item, match);
      }
    });
  }
  if (isObject(value)) checkObject(path, value, schema);
}

function checkObject(path: string, value: Record<string, unknown>, schema: FieldSchema): void {
  for (const name of schema.required ?? []) {
    if (value[name] === undefined) throw invalidPlan(`"${path}" needs "${name}".`);
  }
  for (const [name, member] of Object.entries(value)) {
    const known =
      schema.properties && Object.hasOwn(schema.properties, name) ? schema.properties[name] : undefined;
    const wanted = known ?? schema.additionalProperties;
    if (wanted === false) throw invalidPlan(`"${path}" has no field "${name}".`);
    if (wanted) checkValue(`${path}.${name}`, member, wanted);
  }
}

/** What the value should have been, or null if it is so. */
function faultOf(value: unknown, schema: FieldSchema): string | null {
  if (!hasType(value, schema.type)) return articles[schema.type];
  if (typeof value === 'string') {
    if (schema.enum && !schema.enum.includes(value)) return `one of ${schema.enum.join(', ')}`;
    if (value.length < (schema.minLength ?? 0)) return 'a text that is not empty';
  }
  if (typeof value === 'number') {
    if (value < (schema.minimum ?? -Infinity)) return `at least ${schema.minimum}`;
    if (value > (schema.maximum ?? Infinity)) return `at most ${schema.maximum}`;
    if (value <= (schema.exclusiveMinimum ?? -Infinity)) return `above ${schema.exclusiveMinimum}`;
    if (value >= (schema.exclusiveMaximum ?? Infinity)) return `below ${schema.exclusiveMaximum}`;
  }
  if (Array.isArray(value)) {
    if (value.length < (schema.minItems ?? 0)) return `a list of at least ${schema.minItems}`;
    if (value.length > (schema.maxItems ?? Infinity)) return `a list of at most ${schema.maxItems}`;
    if (schema.uniqueItems && new Set(value).size < value.length) return 'a list without repetitions';
  }
  return null;
}

const articles: Record<FieldSchema['type'], string> = {
  string: 'a text',
  number: 'a number',
  integer: 'a whole number',
  boolean: 'true or false',
  array: 'a list',
  object: 'an object',
};

function hasType(value: unknown, type: FieldSchema['type']): boolean {
  if (type === 'array') return Array.isArray(value);
  if (type === 'object') return isObject(value);
  if (type === 'integer') return Number.isInteger(value);
  return type === 'number' ? Number.isFinite(value) : typeof value === type;
}

function countText(least: number, most: number): string {
  if (least === most) return `exactly ${least}`;
  return Number.isFinite(most) ? `${least} to ${most}` : `at least ${least}`;
}

function isMethodName(value: unknown): value is MethodName {
  return (methodNames as readonly unknown[]).includes(value);
}

function isObject(value: unknown): value is Record<string, unknown> {
  return typeof value === 'object' && value !== null && !Array.isArray(value);
}
