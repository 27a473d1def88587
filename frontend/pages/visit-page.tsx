import { useQuery } from '@tanstack/react-query';
import { useParams } from 'react-router-dom';
import { Breadcrumbs } from '../components/breadcrumbs.tsx';
import { Loaded } from '../components/states.tsx';
import { runSheetQuery } from '../features/capture/api/visits.ts';
import { RunSheetView } from '../features/capture/components/run-sheet-view.tsx';
import { useActing } from '../lib/session/session.ts';
import { usePageTitle } from '../lib/use-page-title.ts';

/** One visit: its run sheet. */
export function VisitPage() {
  const { visitId = '' } = useParams();
  const { studyCode } = useActing();
  const query = useQuery(runSheetQuery(studyCode, visitId));
  const visit = query.data?.visit;
  usePageTitle(visit ? `${visit.participantCode} · ${visit.label}` : 'Visit');
  return (
    <>
      <Breadcrumbs
        crumbs={[
          { label: 'Visits', to: `/studies/${studyCode}/visits` },
          { label: visit?.participantCode ?? 'Visit' },
        ]}
      />
      <Loaded query={query} lines={12}>
        {(sheet) => <RunSheetView study={studyCode} sheet={sheet} />}
      </Loaded>
    </>
  );
}
