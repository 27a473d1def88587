import type { FieldSchema, InstrumentSchema } from './instrument.ts';

/** A field as it was found in the schema, before it is checked and compiled. */
export interface FoundField {
  pointer: string;
  name: string;
  /** References followed. */
  schema: FieldSchema;
  /** JSON Pointer into the instrument's schema. */
  schemaPointer: string;
  required: boolean;
  /** Only there under a condition (`then`, `else`, `oneOf` …). */
  conditional: boolean;
}

export interface FoundFields {
  fields: FoundField[];
  groups: FoundField[];
  /** Field → the fields whose values decide whether it is asked for: what they reveal, it reveals. */
  decidedBy: Map<string, Set<string>>;
}

interface Place {
  /** Address of the object whose properties are read. */
  address: string;
  schemaPointer: string;
  required: boolean;
  conditional: boolean;
}

/**
 * Lists the fields of an instrument in reading order, through groups, references and conditions.
 * References must lead somewhere and not go in a circle: `referenceProblem` refuses those before.
 */
export function expandFields(instrument: InstrumentSchema): FoundFields {
  const fields = new Map<string, FoundField>();
  const groups = new Map<string, FoundField>();
  const decidedBy = new Map<string, Set<string>>();

  const visitObject = (schema: FieldSchema, place: Place): void => {
    for (const [name, property] of Object.entries(schema.properties ?? {})) {
      const field: FoundField = {
        pointer: `${place.address}/${name}`,
        name,
        schema: resolveReference(property, instrument),
        schemaPointer: `${place.schemaPointer}/properties/${name}`,
        required: place.required && (schema.required ?? []).includes(name),
        conditional: place.conditional,
      };
      if (field.schema.type === 'object') visitGroup(field);
      else if (!fields.has(field.pointer) && (field.schema.type || !place.conditional))
        fields.set(field.pointer, field);
    }
    visitConditions(schema, place);
  };

  const visitGroup = (group: FoundField): void => {
    if (!groups.has(group.pointer)) groups.set(group.pointer, group);
    const { pointer: address, schemaPointer, required, conditional } = group;
    visitObject(group.schema, { address, schemaPointer, required, conditional });
  };

  const visitConditions = (schema: FieldSchema, place: Place): void => {
    const within = (keyword: string, part: FieldSchema | undefined, conditional: boolean) => {
      if (!part) return;
      const schemaPointer = `${place.schemaPointer}/${keyword}`;
      visitObject(resolveReference(part, instrument), {
        ...place,
        schemaPointer,
        required: place.required && !conditional,
        conditional: place.conditional || conditional,
      });
    };
    schema.allOf?.forEach((part, index) => within(`allOf/${index}`, part, false));
    for (const keyword of ['anyOf', 'oneOf'] as const) {
      schema[keyword]?.forEach((part, index) => within(`${keyword}/${index}`, part, true));
      const touched = (schema[keyword] ?? []).flatMap((part) => mentioned(part, place.address, instrument));
      decide(touched, touched);
    }
    within('then', schema.then, true);
    within('else', schema.else, true);
    const consequences = [schema.then, schema.else].flatMap((part) =>
      mentioned(part, place.address, instrument),
    );
    decide(consequences, mentioned(schema.if, place.address, instrument));
    for (const [name, needed] of Object.entries(schema.dependentRequired ?? {})) {
      decide(
        needed.map((other) => `${place.address}/${other}`),
        [`${place.address}/${name}`],
      );
    }
    for (const [name, part] of Object.entries(schema.dependentSchemas ?? {})) {
      within(`dependentSchemas/${name}`, part, true);
      decide(mentioned(part, place.address, instrument), [`${place.address}/${name}`]);
    }
  };

  const decide = (fieldsDecided: string[], causes: string[]): void => {
    for (const pointer of fieldsDecided) {
      const known = decidedBy.get(pointer) ?? new Set<string>();
      for (const cause of causes) if (cause !== pointer) known.add(cause);
      decidedBy.set(pointer, known);
    }
  };

  visitObject(instrument, { address: '', schemaPointer: '', required: true, conditional: false });
  return { fields: [...fields.values()], groups: [...groups.values()], decidedBy };
}

/** Follows `#/$defs/name`; what stands beside the reference wins. */
function resolveReference(schema: FieldSchema, instrument: InstrumentSchema): FieldSchema {
  if (schema.$ref === undefined) return schema;
  const target = instrument.$defs?.[schema.$ref.replace('#/$defs/', '')] ?? {};
  const { $ref: _, ...beside } = schema;
  return { ...resolveReference(target, instrument), ...beside };
}

/** The fields that a condition names, by value or as required, at any depth. */
function mentioned(schema: FieldSchema | undefined, address: string, instrument: InstrumentSchema): string[] {
  if (!schema) return [];
  const here = resolveReference(schema, instrument);
  const deeper = [
    here.not,
    here.if,
    here.then,
    here.else,
    ...(here.allOf ?? []),
    ...(here.anyOf ?? []),
    ...(here.oneOf ?? []),
  ];
  return [
    ...(here.required ?? []).map((name) => `${address}/${name}`),
    ...Object.entries(here.properties ?? {}).flatMap(([name, property]) => [
      `${address}/${name}`,
      ...mentioned(property, `${address}/${name}`, instrument),
    ]),
    ...deeper.flatMap((part) => mentioned(part, address, instrument)),
  ];
}
