import { useInfiniteQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import type { QueryDto } from '#schemas/api/monitoring.ts';
import { Button } from '../../../components/button.tsx';
import { DataTable, type Column } from '../../../components/data-table.tsx';
import { StateMark } from '../../../components/pen-mark.tsx';
import { formatDate } from '../../../lib/format/dates.ts';
import { useZone } from '../../../lib/session/session.ts';
import { queriesQuery } from '../api/queries.ts';
import { aboutQuery, queryLooks } from '../model/field-words.ts';

/** Queries, the oldest first, a page after the other. */
export function QueryList({ study, state }: { study: string; state: string }) {
  const query = useInfiniteQuery(queriesQuery(study, state));
  const zone = useZone();
  const columns: Column<QueryDto>[] = [
    {
      header: 'Question',
      cell: ({ id, messages }) => (
        <Link to={`/studies/${study}/queries/${id}`} className="line-clamp-2 font-semibold">
          {messages[0]?.text ?? 'Query'}
        </Link>
      ),
    },
    { header: 'Participant', cell: ({ participantCode }) => participantCode },
    { header: 'About', cell: aboutQuery },
    { header: 'State', cell: (row) => <StateMark {...queryLooks[row.state]} /> },
    {
      header: 'Asked',
      cell: ({ openedBy, openedAt, checkId }) =>
        `${checkId === null ? openedBy : `check ${checkId}`}, ${formatDate(openedAt, zone)}`,
    },
    {
      header: 'Age',
      numeric: true,
      sortKey: 'age',
      sortValue: ({ ageDays }) => ageDays,
      cell: ({ ageDays }) => (ageDays === 1 ? '1 day' : `${ageDays} days`),
    },
  ];
  return (
    <>
      <DataTable
        caption="Queries"
        captionHidden
        name="queries"
        columns={columns}
        query={{
          data: query.data?.pages.flatMap(({ items }) => items),
          error: query.error,
          refetch: query.refetch,
        }}
        rowKey={({ id }) => id}
        empty={{
          title: state === '' ? 'No query yet' : `No query is ${state}`,
          children: <p>A monitor asks them at the verification desk, on the field that they are about.</p>,
        }}
      />
      {query.hasNextPage && (
        <div className="border-t px-4 py-3">
          <Button busy={query.isFetchingNextPage} onClick={() => void query.fetchNextPage()}>
            Show more
          </Button>
        </div>
      )}
    </>
  );
}
