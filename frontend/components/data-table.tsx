import { useState, type ReactNode } from 'react';
import { usePreference } from '../lib/preferences.ts';
import { useUrlSort } from '../lib/use-url-state.ts';
import { classNames } from './class-names.ts';
import { ColumnChoice } from './column-choice.tsx';
import { EmptyState, FailedState, Skeleton, type Loadable } from './states.tsx';
import { TableBody } from './table-body.tsx';
import type { Column } from './table-column.ts';
import { TableHead } from './table-head.tsx';

export type { Column } from './table-column.ts';

interface DataTableProps<Row> {
  /** Says what the table lists; read aloud, and shown unless `captionHidden`. */
  caption: string;
  captionHidden?: boolean;
  columns: readonly Column<Row>[];
  query: Loadable<readonly Row[]>;
  rowKey: (row: Row) => string;
  /** Shown when there is no row. */
  empty: { title: string; children?: ReactNode };
  /** Remembers which columns the person wants; names the table. */
  name?: string;
  /** Name of the sort in the address, when a page has two tables. */
  sortParam?: string;
  defaultSort?: string;
  rowState?: (row: Row) => string | undefined;
}

const all: string[] = [];
const virtualFrom = 120;

/** Columns as data; head sticky; sort in the address; loading, empty, failed and forbidden states included. */
export function DataTable<Row>(props: DataTableProps<Row>) {
  const {
    caption,
    captionHidden = false,
    columns,
    query,
    rowKey,
    empty,
    name,
    sortParam,
    defaultSort,
    rowState,
  } = props;
  // An element in state, not a ref: the virtual rows must hear when it is there.
  const [scroller, setScroller] = useState<HTMLDivElement | null>(null);
  const [sort, turnSort] = useUrlSort(sortParam, defaultSort);
  const [hidden, setHidden] = usePreference(`table:${name ?? caption}:hidden`, all);
  const [added, setAdded] = usePreference(`table:${name ?? caption}:added`, all);
  const [choosing, setChoosing] = useState(false);

  if (query.data === undefined) {
    return query.error ? (
      <FailedState error={query.error} onRetry={() => void query.refetch()} />
    ) : (
      <Skeleton lines={6} label={`Loading: ${caption}`} />
    );
  }
  if (query.data.length === 0) return <EmptyState {...empty} />;

  const shown = columns.filter(({ header, optional }) =>
    optional ? added.includes(header) : !hidden.includes(header),
  );
  const by = columns.find(({ sortKey }) => sortKey !== undefined && sortKey === sort?.key);
  const rows = by?.sortValue ? sorted(query.data, by.sortValue, sort?.descending ?? false) : query.data;
  const virtual = rows.length > virtualFrom;

  return (
    <div>
      {name && (
        <ColumnChoice
          columns={columns}
          shown={shown.map(({ header }) => header)}
          open={choosing}
          onToggle={() => setChoosing(!choosing)}
          onChange={(header, on) => {
            const optional = columns.find((column) => column.header === header)?.optional;
            if (optional) setAdded(on ? [...added, header] : added.filter((other) => other !== header));
            else setHidden(on ? hidden.filter((other) => other !== header) : [...hidden, header]);
          }}
        />
      )}
      <div
        ref={setScroller}
        role="region"
        aria-label={caption}
        // A region that scrolls must be reachable by keyboard (WCAG 2.1.1).
        // eslint-disable-next-line jsx-a11y/no-noninteractive-tabindex
        tabIndex={0}
        className={classNames('relative overflow-auto', virtual && 'max-h-[70dvh]')}
      >
        <table
          className="w-full border-separate border-spacing-0"
          aria-rowcount={virtual ? rows.length + 1 : undefined}
        >
          <caption className={captionHidden ? 'sr-only' : 'px-3 pt-3 pb-1 text-left font-semibold text-soot'}>
            {caption}
          </caption>
          <TableHead columns={shown} sort={sort} onSort={turnSort} />
          <TableBody
            columns={shown}
            rows={rows}
            rowKey={rowKey}
            rowState={rowState}
            scroller={scroller}
            virtual={virtual}
          />
        </table>
      </div>
    </div>
  );
}

function sorted<Row>(rows: readonly Row[], value: (row: Row) => string | number, descending: boolean): Row[] {
  const direction = descending ? -1 : 1;
  return [...rows].sort((one, other) => direction * compared(value(one), value(other)));
}

function compared(one: string | number, other: string | number): number {
  if (typeof one === 'number' && typeof other === 'number') return one - other;
  return String(one).localeCompare(String(other), 'en', { numeric: true });
}
