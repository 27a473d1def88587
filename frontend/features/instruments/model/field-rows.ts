import type { CompiledField, CompiledInstrument } from '#schemas/instruments/compiled-instrument.ts';
import { readableUnit } from '#frontend/lib/format/units.ts';

/** A field as the list at the drafting table and the published version show it. */
export interface FieldRow {
  pointer: string;
  schemaPointer: string;
  label: string;
  kind: string;
  unit: string;
  /** Words for what is special about it. */
  marks: string[];
}

export const fieldRows = ({ fields }: CompiledInstrument): FieldRow[] =>
  fields.map((field) => ({
    pointer: field.pointer,
    schemaPointer: field.schemaPointer,
    label: field.label,
    kind: kindInWords(field),
    unit: field.unit === undefined ? '' : readableUnit(field.unit),
    marks: marksOf(field),
  }));

function kindInWords({ type, readings, choices, format, derived }: CompiledField): string {
  if (derived) return 'derived';
  if (readings) return `${readings.count} readings`;
  if (choices) return type === 'choices' ? 'several choices' : 'one choice';
  if (format) return format === 'date' ? 'date' : 'date and time';
  return {
    number: 'number',
    integer: 'whole number',
    string: 'text',
    boolean: 'yes or no',
    choices: 'choices',
  }[type];
}

function marksOf({ required, conditional, level, visibility, source, testCode }: CompiledField): string[] {
  return [
    ...(required ? ['required'] : []),
    ...(conditional ? ['under a condition'] : []),
    ...(level === 'unblinding' ? ['unblinding'] : []),
    ...(visibility.identifying === 'quasi' ? ['may identify'] : []),
    ...(visibility.freeText ? ['free text'] : []),
    ...(source ? ['verified against source'] : []),
    ...(testCode === undefined ? [] : [testCode]),
  ];
}
