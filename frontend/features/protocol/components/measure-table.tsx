import type { ShownProtocol } from '#schemas/api/protocol.ts';
import { measuredQuantities, type Measure, type ValueReference } from '#schemas/protocol/protocol.ts';
import { DataTable, type Column } from '#frontend/components/data-table.tsx';
import { HiddenValue } from '#frontend/components/pen-mark.tsx';
import { readableUnit } from '#frontend/lib/format/units.ts';

interface Row extends Measure {
  visit: string;
}

const columns: Column<Row>[] = [
  { header: 'Visit', cell: ({ visit }) => visit },
  { header: 'Time point', cell: ({ timePoint }) => timePoint },
  { header: 'Quantity', cell: ({ quantity }) => quantity },
  { header: 'Unit', cell: ({ quantity }) => readableUnit(measuredQuantities[quantity]) },
  {
    header: 'Comes from',
    cell: ({ from, combine }) => (
      <>
        {combine === 'mean' && from.length > 1 && 'mean of '}
        {from.map(sourceInWords).join(', ')}
      </>
    ),
  },
  {
    header: 'Blinding',
    cell: ({ unblinding }) => (unblinding ? <HiddenValue word="hidden until unblinding" /> : 'open'),
  },
];

const sourceInWords = ({ visitType, step, pointer }: ValueReference): string =>
  [visitType, step, pointer.slice(1)].filter(Boolean).join(' › ');

/** What the analysis takes from each visit, and what is shown while readings go in. */
export function MeasureTable({ content }: { content: ShownProtocol }) {
  const rows = content.visitTypes.flatMap(({ label, measures }) =>
    measures.map((measure): Row => ({ ...measure, visit: label })),
  );
  return (
    <>
      <DataTable
        caption="Measures"
        captionHidden
        columns={columns}
        query={{ data: rows, error: null, refetch: () => undefined }}
        rowKey={({ visit, key }) => `${visit} ${key}`}
        empty={{ title: 'No visit measures anything yet' }}
      />
      {content.liveQuantities.length > 0 && (
        <section className="flex flex-col gap-2 p-4">
          <h2 className="text-base">Shown while the readings go in</h2>
          <ul className="list-disc pl-5">
            {content.liveQuantities.map(({ key, label, quantity, unblinding }) => (
              <li key={key}>
                {label} <span className="font-mono text-sm text-ink-soft">{quantity}</span>
                {unblinding && (
                  <>
                    {' '}
                    <HiddenValue word="unblinded members only" />
                  </>
                )}
              </li>
            ))}
          </ul>
        </section>
      )}
    </>
  );
}
