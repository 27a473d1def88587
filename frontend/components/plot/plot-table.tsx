import { readableUnit, spokenUnit } from '../../lib/format/units.ts';

export interface PlotTableContent {
  columns: readonly { header: string; unit?: string; numeric?: boolean }[];
  /** Formatted cells, a row for each thing drawn. */
  rows: readonly (readonly string[])[];
}

/** The data of a plot in words and digits. */
export function PlotTable({
  caption,
  table: { columns, rows },
}: {
  caption: string;
  table: PlotTableContent;
}) {
  return (
    <div
      role="region"
      aria-label={`${caption}, as a table`}
      // A region that scrolls must be reachable by keyboard (WCAG 2.1.1).
      // eslint-disable-next-line jsx-a11y/no-noninteractive-tabindex
      tabIndex={0}
      className="relative max-h-[60dvh] overflow-auto"
    >
      <table className="w-full border-separate border-spacing-0 text-sm">
        <caption className="sr-only">{caption}, as a table</caption>
        <thead>
          <tr>
            {columns.map(({ header, unit, numeric }) => (
              <th
                key={header}
                scope="col"
                className={`sticky top-0 border-b bg-paper px-3 py-1.5 font-medium text-ink-soft ${numeric ? 'text-right' : 'text-left'}`}
              >
                {header}
                {unit && (
                  <>
                    <span aria-hidden> {readableUnit(unit)}</span>
                    <span className="sr-only">, {spokenUnit(unit)}</span>
                  </>
                )}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {rows.map((cells, row) => (
            <tr key={`${row}:${cells[0]}`}>
              {cells.map((cell, at) => (
                <td
                  key={columns[at]?.header ?? at}
                  className={`border-b border-rule-soft px-3 py-1.5 ${columns[at]?.numeric ? 'numeric' : ''}`}
                >
                  {cell}
                </td>
              ))}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}
