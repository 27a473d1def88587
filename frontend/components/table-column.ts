import type { ReactNode } from 'react';

/** A column as data. */
export interface Column<Row> {
  header: string;
  cell: (row: Row) => ReactNode;
  /** UCUM code, shown in the head. */
  unit?: string;
  /** Name of the order in the address and for the server. */
  sortKey?: string;
  /** Sorts here instead of on the server; with `sortKey`. */
  sortValue?: (row: Row) => string | number;
  /** Numbers stand at the right. */
  numeric?: boolean;
  /** Left out until the person chooses it. */
  optional?: boolean;
}
