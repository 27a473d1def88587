import type { EntryValue, EntryValues } from './entry-values.ts';

/**
 * An instrument: a JSON Schema (2020-12) of one filled-in form, with annotations of our own.
 *
 * The root is a closed object; its properties are fields, or objects that group fields. `meta-schema.ts` says
 * which keywords are allowed, `compile-instrument.ts` what they mean.
 */
export interface InstrumentSchema extends FieldSchema {
  $schema: 'https://json-schema.org/draft/2020-12/schema';
  /** What stays the same from version to version, in kebab-case. */
  instrumentKey: string;
  title: string;
  type: 'object';
  properties: Record<string, FieldSchema>;
  $defs?: Record<string, FieldSchema>;
  checks?: InstrumentCheck[];
  /** Codes of `vocabulary/caution-texts.ts`, shown where the values are entered. */
  cautions?: string[];
}

/** A field, or a group of fields (`type: 'object'`), or a schema that a condition applies. */
export interface FieldSchema {
  $schema?: string;
  $id?: string;
  $ref?: string;
  $comment?: string;
  title?: string;
  description?: string;
  type?: 'object' | 'array' | 'string' | 'number' | 'integer' | 'boolean';
  properties?: Record<string, FieldSchema>;
  required?: string[];
  additionalProperties?: false;
  unevaluatedProperties?: false;
  dependentRequired?: Record<string, string[]>;
  dependentSchemas?: Record<string, FieldSchema>;
  items?: FieldSchema;
  minItems?: number;
  maxItems?: number;
  uniqueItems?: boolean;
  enum?: (string | number | boolean)[];
  const?: string | number | boolean;
  default?: string | number | boolean;
  minimum?: number;
  maximum?: number;
  exclusiveMinimum?: number;
  exclusiveMaximum?: number;
  multipleOf?: number;
  minLength?: number;
  maxLength?: number;
  pattern?: string;
  format?: 'date' | 'date-time';
  allOf?: FieldSchema[];
  anyOf?: FieldSchema[];
  oneOf?: FieldSchema[];
  not?: FieldSchema;
  if?: FieldSchema;
  then?: FieldSchema;
  else?: FieldSchema;
  /** UCUM code. The unit is part of what the field is. */
  unit?: string;
  /** `quasi`: may single a person out together with others. Direct identifiers have a store of their own. */
  identifying?: 'none' | 'quasi';
  /** The value, and all that comes from it, would reveal the allocated condition. On the root: each field is. */
  unblinding?: boolean;
  /** Written in a person's own words: leaves the study only after it was read. */
  freeText?: boolean;
  /** There is a source document against which the value is verified. */
  source?: boolean;
  readings?: ReadingsRule;
  derive?: Derivation;
  missingReasons?: string[];
  /** CDISC test code: at most eight letters, digits, underscores, no digit first. */
  testCode?: string;
  /** What a choice means, in the order of `enum`. */
  choiceLabels?: string[];
}

/** How repeated readings of one field are taken, which of them count, and how they become one value. */
export interface ReadingsRule {
  /** How many are taken when nothing goes wrong. */
  count: number;
  /** How many must count for the entry to be completed. */
  minimum: number;
  /** So many first readings never count. */
  discardFirst?: number;
  /** Which of the accepted ones count. */
  use: 'all' | { last: number };
  summary: 'mean' | 'median';
  /** One more is asked for when the last two that count differ by more than this (in the field's unit). */
  extraIfDiffer?: { by: number };
  /** The closed list of reasons for setting a reading aside; absent: those of `vocabulary/rejection-reasons.ts`. */
  rejectionReasons?: string[];
  /** A rejected reading is taken again; otherwise the number shrinks. */
  replaceRejected: boolean;
  /** Fields with the same word are read in one act: a reading counts in all of them or in none. */
  together?: string;
}

/** A CEL expression, or a quantity of the analysis library with where its inputs come from. */
type Derivation = string | { quantity: string; inputs: Record<string, QuantityInput> };

/** The address of a field, or a constant with its unit. */
export type QuantityInput = string | { value: number; unit: string };

export interface InstrumentCheck {
  id: string;
  /** `hard` refuses the value; `soft` asks for a confirmation with a reason. */
  severity: 'hard' | 'soft';
  /** CEL, true when all is well. */
  expression: string;
  message: string;
  /** The fields at which the message stands. */
  fields: string[];
  /** Which readings the expression sees: those that count, or all that were entered and not rejected. */
  readings?: 'counted' | 'entered';
  /** A confirmed soft check opens a query. */
  opensQuery?: boolean;
}

/** What a person may learn from a field: compiled once for each version and asked by everything that shows values. */
export interface Visibility {
  identifying: 'none' | 'quasi';
  unblinding: boolean;
  freeText: boolean;
}

/** Sample values with what must come of them: publication waits until all come out as said (IV-03). */
export interface SampleEntry {
  name: string;
  values: EntryValues;
  expect: {
    /** `asks`: soft checks only. */
    outcome: 'passes' | 'asks' | 'refused';
    /** The findings that must come, no more and no fewer; absent: not compared. */
    checks?: string[];
    /** Derived values by pointer, compared to a relative 1e-9; `null`: must be missing. */
    derived?: Record<string, EntryValue | null>;
  };
}

/** A place in an instrument that needs attention, and what to do about it. */
export interface InstrumentProblem {
  /** JSON Pointer into the instrument's schema. */
  pointer: string;
  message: string;
  /** Within the text of an expression. */
  range?: { start: number; end: number };
}
