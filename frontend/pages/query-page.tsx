import { useQuery } from '@tanstack/react-query';
import { useParams } from 'react-router-dom';
import { Breadcrumbs } from '../components/breadcrumbs.tsx';
import { Loaded } from '../components/states.tsx';
import { queryThreadQuery } from '../features/monitoring/api/queries.ts';
import { QueryThread } from '../features/monitoring/components/query-thread.tsx';
import { useActing } from '../lib/session/session.ts';
import { usePageTitle } from '../lib/use-page-title.ts';

/** One query with its thread. */
export function QueryPage() {
  const { queryId = '' } = useParams();
  const { studyCode } = useActing();
  const query = useQuery(queryThreadQuery(studyCode, queryId));
  const code = query.data?.participantCode;
  usePageTitle(code === undefined ? 'Query' : `Query · ${code}`);
  return (
    <>
      <Breadcrumbs
        crumbs={[{ label: 'Queries', to: `/studies/${studyCode}/queries` }, { label: code ?? 'Query' }]}
      />
      <Loaded query={query} lines={8}>
        {(thread) => <QueryThread study={studyCode} query={thread} />}
      </Loaded>
    </>
  );
}
