import type { FieldSchema, InstrumentSchema } from '#schemas/instruments/instrument.ts';

/** As large as an instrument may be: 140 numbers in groups and 52 rows of five readings, 400 places to type. */
export function formOf400Fields(): InstrumentSchema {
  const properties: Record<string, FieldSchema> = {
    arm: { type: 'string', title: 'Arm', enum: ['left', 'right', 'neither'] },
  };
  for (let group = 0; group < 14; group += 1) {
    const fields: Record<string, FieldSchema> = {};
    for (let field = 0; field < 10; field += 1) {
      fields[`value${field}`] = {
        type: 'number',
        title: `Value ${field}`,
        unit: 'mm[Hg]',
        minimum: 0,
        maximum: 300,
      };
    }
    properties[`group${group}`] = {
      type: 'object',
      title: `Group ${group}`,
      properties: fields,
      additionalProperties: false,
    };
  }
  for (let row = 0; row < 52; row += 1) {
    properties[`row${row}`] = {
      type: 'array',
      title: `Flow ${row}`,
      unit: 'mL/min/dL',
      items: { type: 'number', minimum: 0, maximum: 100 },
      maxItems: 8,
      readings: { count: 5, minimum: 3, use: 'all', summary: 'mean', replaceRejected: true },
    };
  }
  return {
    $schema: 'https://json-schema.org/draft/2020-12/schema',
    instrumentKey: 'four-hundred',
    title: 'Four hundred fields',
    type: 'object',
    properties,
    unevaluatedProperties: false,
    if: { properties: { arm: { const: 'neither' } }, required: ['arm'] },
    then: { properties: { whyNeither: { type: 'string', title: 'Why neither' } } },
  };
}
