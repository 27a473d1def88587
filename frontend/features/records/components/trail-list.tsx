import { useInfiniteQuery } from '@tanstack/react-query';
import { Button } from '../../../components/button.tsx';
import { EmptyState, FailedState, Skeleton } from '../../../components/states.tsx';
import { trailQuery, type TrailFilter } from '../api/trail.ts';
import { TrailEvent } from './trail-event.tsx';

interface TrailListProps {
  study: string | null;
  filter: TrailFilter;
  onSubject: (subject: string) => void;
}

/** Events, newest first, a page after the other. */
export function TrailList({ study, filter, onSubject }: TrailListProps) {
  const query = useInfiniteQuery(trailQuery(study, filter));
  if (query.data === undefined) {
    return query.error ? (
      <FailedState error={query.error} onRetry={() => void query.refetch()} />
    ) : (
      <Skeleton lines={8} label="Loading the trail" />
    );
  }
  const events = query.data.pages.flatMap(({ items }) => items);
  if (events.length === 0) {
    return (
      <EmptyState title="No event fits these filters">
        <p>Widen the days, or choose anything that was done.</p>
      </EmptyState>
    );
  }
  return (
    <>
      <ol aria-label="Events, newest first" className="border-t">
        {events.map((event) => (
          <TrailEvent key={event.sequence} event={event} onSubject={onSubject} />
        ))}
      </ol>
      {query.hasNextPage && (
        <div className="px-4 py-3">
          <Button busy={query.isFetchingNextPage} onClick={() => void query.fetchNextPage()}>
            Older events
          </Button>
        </div>
      )}
    </>
  );
}
