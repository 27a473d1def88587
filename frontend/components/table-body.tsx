import { useVirtualizer } from '@tanstack/react-virtual';
import { classNames } from './class-names.ts';
import type { Column } from './table-column.ts';

interface TableBodyProps<Row> {
  columns: readonly Column<Row>[];
  rows: readonly Row[];
  rowKey: (row: Row) => string;
  rowState: ((row: Row) => string | undefined) | undefined;
  scroller: HTMLDivElement | null;
  /** Draws only the rows in sight. */
  virtual: boolean;
}

export function TableBody<Row>(props: TableBodyProps<Row>) {
  return props.virtual ? <VirtualBody {...props} /> : <WholeBody {...props} />;
}

function WholeBody<Row>({ columns, rows, rowKey, rowState }: TableBodyProps<Row>) {
  return (
    <tbody>
      {rows.map((row) => (
        <Line key={rowKey(row)} row={row} columns={columns} state={rowState?.(row)} />
      ))}
    </tbody>
  );
}

function VirtualBody<Row>({ columns, rows, rowKey, rowState, scroller }: TableBodyProps<Row>) {
  // The compiler that this rule speaks for is not in use here.
  // eslint-disable-next-line react-hooks/incompatible-library
  const virtualizer = useVirtualizer({
    count: rows.length,
    getScrollElement: () => scroller,
    estimateSize: () => 38,
    overscan: 12,
    getItemKey: (index) => rowKey(rows[index]!),
  });
  const items = virtualizer.getVirtualItems();
  const before = items[0]?.start ?? 0;
  const after = virtualizer.getTotalSize() - (items.at(-1)?.end ?? 0);
  return (
    <tbody>
      <Spacer height={before} columns={columns.length} />
      {items.map(({ index, key }) => (
        <Line
          key={String(key)}
          row={rows[index]!}
          columns={columns}
          state={rowState?.(rows[index]!)}
          position={index + 2}
          measure={virtualizer.measureElement}
          index={index}
        />
      ))}
      <Spacer height={after} columns={columns.length} />
    </tbody>
  );
}

function Spacer({ height, columns }: { height: number; columns: number }) {
  if (height <= 0) return null;
  return (
    <tr aria-hidden>
      <td colSpan={columns} style={{ height, padding: 0 }} />
    </tr>
  );
}

interface LineProps<Row> {
  row: Row;
  columns: readonly Column<Row>[];
  state: string | undefined;
  position?: number;
  index?: number;
  measure?: (element: HTMLTableRowElement | null) => void;
}

function Line<Row>({ row, columns, state, position, index, measure }: LineProps<Row>) {
  return (
    <tr
      ref={measure}
      data-index={index}
      data-state={state}
      aria-rowindex={position}
      className="data-[state=here]:bg-venous-wash"
    >
      {columns.map(({ header, cell, numeric }) => (
        <td
          key={header}
          className={classNames('border-b border-rule-soft px-3 py-2 align-baseline', numeric && 'numeric')}
        >
          {cell(row)}
        </td>
      ))}
    </tr>
  );
}
