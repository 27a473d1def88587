import { useInfiniteQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import type { VisitDto } from '#schemas/api/capture.ts';
import { Button } from '../../../components/button.tsx';
import { DataTable, type Column } from '../../../components/data-table.tsx';
import { formatMoment } from '../../../lib/format/dates.ts';
import { useZone } from '../../../lib/session/session.ts';
import { completedVisitsQuery } from '../api/verification.ts';

/** The completed visits, each to be compared with its source. */
export function VerificationList({ study }: { study: string }) {
  const query = useInfiniteQuery(completedVisitsQuery(study));
  const zone = useZone();
  const columns: Column<VisitDto>[] = [
    {
      header: 'Participant',
      sortKey: 'participant',
      sortValue: ({ participantCode }) => participantCode,
      cell: ({ id, participantCode }) => (
        <Link to={`/studies/${study}/verification/${id}`} className="font-semibold">
          {participantCode}
        </Link>
      ),
    },
    { header: 'Visit', cell: ({ label }) => label },
    {
      header: 'Completed',
      sortKey: 'ended',
      sortValue: ({ endedAt }) => endedAt ?? '',
      cell: ({ endedAt }) => (endedAt === null ? '' : formatMoment(endedAt, zone)),
    },
  ];
  return (
    <>
      <DataTable
        caption="Completed visits"
        captionHidden
        name="verification"
        columns={columns}
        query={{
          data: query.data?.pages.flatMap(({ items }) => items),
          error: query.error,
          refetch: query.refetch,
        }}
        rowKey={({ id }) => id}
        defaultSort="ended"
        empty={{
          title: 'No completed visit yet',
          children: <p>A visit comes here when its coordinator completes it.</p>,
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
