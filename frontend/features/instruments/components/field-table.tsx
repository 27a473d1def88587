import type { CompiledInstrument } from '#schemas/instruments/compiled-instrument.ts';
import { DataTable, type Column } from '#frontend/components/data-table.tsx';
import { fieldRows, type FieldRow } from '../model/field-rows.ts';

const columns: Column<FieldRow>[] = [
  { header: 'Field', cell: ({ label }) => label },
  { header: 'Address', cell: ({ pointer }) => <span className="font-mono text-sm">{pointer}</span> },
  { header: 'Kind', cell: ({ kind }) => kind },
  { header: 'Unit', cell: ({ unit }) => unit || '–' },
  { header: 'Marks', cell: ({ marks }) => marks.join(', ') || '–' },
];

/** Every field of an instrument with what it is and what it reveals. */
export function FieldTable({ compiled }: { compiled: CompiledInstrument }) {
  return (
    <DataTable
      caption={`Fields of ${compiled.title}`}
      captionHidden
      columns={columns}
      query={{ data: fieldRows(compiled), error: null, refetch: () => undefined }}
      rowKey={({ pointer }) => pointer}
      empty={{ title: 'No field' }}
    />
  );
}
