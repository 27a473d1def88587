import { useInfiniteQuery } from '@tanstack/react-query';
import { useEffect, useMemo } from 'react';
import { Card, PageHead } from '../components/card.tsx';
import { PaneTabs } from '../components/pane-tabs.tsx';
import { StateMark } from '../components/pen-mark.tsx';
import { EmptyState, FailedState, Skeleton } from '../components/states.tsx';
import { everyVisitQuery } from '../features/capture/api/visits.ts';
import { RibbonChart } from '../features/capture/components/ribbon-chart.tsx';
import { VisitTable } from '../features/capture/components/visit-table.tsx';
import { ribbonOf } from '../features/capture/model/ribbon.ts';
import { useActing } from '../lib/session/session.ts';
import { usePageTitle } from '../lib/use-page-title.ts';
import { useUrlState } from '../lib/use-url-state.ts';

/** The whole study at a glance: who came when, inside the window, early, late or not yet. */
export function RibbonPage() {
  const { studyCode } = useActing();
  usePageTitle(`Visit ribbon · ${studyCode}`);
  const [view, setView] = useUrlState('view', 'ribbon');
  const query = useInfiniteQuery(everyVisitQuery(studyCode));
  const { hasNextPage, isFetchingNextPage, fetchNextPage } = query;
  useEffect(() => {
    if (hasNextPage && !isFetchingNextPage) void fetchNextPage();
  }, [hasNextPage, isFetchingNextPage, fetchNextPage]);
  const visits = useMemo(() => query.data?.pages.flatMap(({ items }) => items), [query.data]);
  const ribbon = useMemo(() => ribbonOf(visits ?? []), [visits]);

  if (visits === undefined) {
    return query.error ? (
      <FailedState error={query.error} onRetry={() => void query.refetch()} />
    ) : (
      <Skeleton lines={8} label="Loading the visits" />
    );
  }
  return (
    <>
      <PageHead
        title="Visit ribbon"
        note={`${ribbon.rows.length} participants, ${visits.length} visits${hasNextPage ? ' so far' : ''}`}
      />
      <Card flush>
        {visits.length === 0 ? (
          <EmptyState title="No visit yet">
            <p>Plan one from a participant’s page.</p>
          </EmptyState>
        ) : (
          <PaneTabs
            label="The visits as"
            chosen={view}
            onChoose={setView}
            panes={[
              {
                key: 'ribbon',
                label: 'Ribbon',
                content: (
                  <>
                    <p className="flex flex-wrap gap-x-5 gap-y-1 px-4 py-3 text-sm text-ink-soft">
                      <span>A bar is a visit’s window; the mark stands on the day.</span>
                      <StateMark state="settled" word="completed" />
                      <StateMark state="underway" word="under way" />
                      <StateMark state="todo" word="planned" />
                      <StateMark state="asks" word="overdue" />
                      <StateMark state="late" word="missed" />
                    </p>
                    <RibbonChart study={studyCode} ribbon={ribbon} />
                  </>
                ),
              },
              {
                key: 'table',
                label: 'Table',
                content: (
                  <VisitTable
                    study={studyCode}
                    query={{ data: visits, error: null, refetch: query.refetch }}
                  />
                ),
              },
            ]}
          />
        )}
      </Card>
    </>
  );
}
