import { readableUnit, spokenUnit } from '../lib/format/units.ts';
import type { Sort } from '../lib/use-url-state.ts';
import { classNames } from './class-names.ts';
import type { Column } from './table-column.ts';

interface TableHeadProps<Row> {
  columns: readonly Column<Row>[];
  sort: Sort | undefined;
  onSort: (key: string) => void;
}

export function TableHead<Row>({ columns, sort, onSort }: TableHeadProps<Row>) {
  return (
    <thead>
      <tr>
        {columns.map((column) => {
          const { header, unit, sortKey, numeric } = column;
          const sorted = sortKey !== undefined && sort?.key === sortKey;
          return (
            <th
              key={header}
              scope="col"
              aria-sort={sorted ? (sort.descending ? 'descending' : 'ascending') : undefined}
              className={classNames(
                'sticky top-0 z-1 border-b bg-paper px-3 py-1.5 text-sm font-medium whitespace-nowrap text-ink-soft',
                numeric ? 'text-right' : 'text-left',
              )}
            >
              {sortKey === undefined ? (
                <HeadWords header={header} unit={unit} />
              ) : (
                <button
                  type="button"
                  onClick={() => onSort(sortKey)}
                  className="min-h-6 font-medium hover:text-ink"
                >
                  <HeadWords header={header} unit={unit} />
                  <span aria-hidden className="ml-1 inline-block w-2.5">
                    {sorted ? (sort.descending ? '↓' : '↑') : ''}
                  </span>
                </button>
              )}
            </th>
          );
        })}
      </tr>
    </thead>
  );
}

function HeadWords({ header, unit }: { header: string; unit: string | undefined }) {
  if (!unit) return header;
  return (
    <>
      {header}
      <span aria-hidden className="font-normal">
        {' '}
        {readableUnit(unit)}
      </span>
      <span className="sr-only">, {spokenUnit(unit)}</span>
    </>
  );
}
