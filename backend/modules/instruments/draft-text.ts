import type { InstrumentSchema, SampleEntry } from '#schemas/instruments/instrument.ts';

/** A schema as it is laid on the drafting table. */
export const draftText = (schema: object): string => `${JSON.stringify(schema, null, 2)}\n`;

/** Where a new instrument begins: one field, to be changed. */
export const blankInstrument = (key: string, title: string): InstrumentSchema => ({
  $schema: 'https://json-schema.org/draft/2020-12/schema',
  instrumentKey: key,
  title,
  type: 'object',
  additionalProperties: false,
  required: [],
  properties: { note: { type: 'string', title: 'Note', maxLength: 200, freeText: true } },
});

/** What a draft holds, and what it was begun from. */
interface DraftContent {
  text: string;
  samples: SampleEntry[];
}

/** Whether a draft says anything that the version it was begun from does not; a discarded one says nothing. */
export function isChanged(
  draft: DraftContent,
  base: { schema: InstrumentSchema; samples: SampleEntry[] } | null,
): boolean {
  if (draft.text === '') return false;
  if (base === null) return true;
  return (
    draft.text !== draftText(base.schema) || JSON.stringify(draft.samples) !== JSON.stringify(base.samples)
  );
}

/** The title a draft has now, or its key while the text cannot be read. */
export function draftTitle({ text, key }: { text: string; key: string }): string {
  try {
    const { title } = JSON.parse(text) as { title?: unknown };
    return typeof title === 'string' && title !== '' ? title : key;
  } catch {
    return key;
  }
}
