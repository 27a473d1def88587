import type { FieldSchema, InstrumentSchema } from '#schemas/instruments/instrument.ts';

export const fieldKinds = {
  number: 'a number',
  readings: 'a number, read several times',
  text: 'a line of text',
  choice: 'one of several choices',
  yesNo: 'yes or no',
  date: 'a date',
} as const;
export type FieldKind = keyof typeof fieldKinds;

export interface NewField {
  label: string;
  kind: FieldKind;
  /** UCUM code, for numbers. */
  unit: string;
  required: boolean;
}

/** A field's name from its label: `Systolic pressure` → `systolicPressure`, numbered when it is taken. */
export function nameFrom(label: string, taken: readonly string[]): string {
  const words = label
    .normalize('NFKD')
    .replaceAll(/[^A-Za-z0-9 ]/g, '')
    .trim()
    .split(/ +/);
  const joined = words.map((word, at) => (at === 0 ? lower(word) : upper(word))).join('');
  const name = (/^[a-z]/.test(joined) ? joined : `field${upper(joined)}`).slice(0, 36);
  for (let number = 1; ; number += 1) {
    const wanted = number === 1 ? name : `${name}${number}`;
    if (!taken.includes(wanted)) return wanted;
  }
}

const lower = (word: string): string => word.charAt(0).toLowerCase() + word.slice(1);
const upper = (word: string): string => word.charAt(0).toUpperCase() + word.slice(1);

/**
 * The text with a field added at the end of the form; the rest of the draft stays as it means.
 * @throws SyntaxError when the text is no JSON
 */
export function withField(text: string, field: NewField): { text: string; name: string } {
  const schema = parsed(text);
  const properties = schema.properties ?? {};
  const name = nameFrom(field.label, Object.keys(properties));
  const required = field.required ? [...(schema.required ?? []), name] : schema.required;
  const next = { ...schema, properties: { ...properties, [name]: schemaOf(field) } };
  return { text: written(required === undefined ? next : { ...next, required }), name };
}

/** The text with a field of the root moved up or down among its neighbours. */
export function withFieldMoved(text: string, name: string, by: -1 | 1): string {
  const schema = parsed(text);
  const entries = Object.entries(schema.properties ?? {});
  const from = entries.findIndex(([other]) => other === name);
  const to = from + by;
  const [moving, neighbour] = [entries[from], entries[to]];
  if (moving === undefined || neighbour === undefined) return text;
  entries[to] = moving;
  entries[from] = neighbour;
  return written({ ...schema, properties: Object.fromEntries(entries) });
}

function schemaOf({ label, kind, unit }: NewField): FieldSchema {
  const title = label.trim();
  switch (kind) {
    case 'number':
      return { type: 'number', title, unit };
    case 'readings':
      return {
        type: 'array',
        title,
        unit,
        items: { type: 'number' },
        maxItems: 6,
        readings: { count: 3, minimum: 2, use: 'all', summary: 'mean', replaceRejected: true },
      };
    case 'text':
      return { type: 'string', title, maxLength: 200, freeText: true };
    case 'choice':
      return { type: 'string', title, enum: ['first', 'second'], choiceLabels: ['First', 'Second'] };
    case 'yesNo':
      return { type: 'boolean', title };
    case 'date':
      return { type: 'string', title, format: 'date' };
  }
}

const parsed = (text: string): InstrumentSchema => JSON.parse(text) as InstrumentSchema;
const written = (schema: object): string => `${JSON.stringify(schema, null, 2)}\n`;
