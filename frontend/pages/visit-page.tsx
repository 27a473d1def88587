import { useQuery } from '@tanstack/react-query';
import { useParams } from 'react-router-dom';
import { Breadcrumbs } from '../components/breadcrumbs.tsx';
import { Loaded } from '../components/states.tsx';
import { runSheetQuery } from '../features/capture/api/visits.ts';
import { RunSheetView } from '../features/capture/components/run-sheet-view.tsx';
import { SignaturePanel } from '../features/records/components/signature-panel.tsx';
import { SourcePanel } from '../features/source/components/source-panel.tsx';
import { useMay } from '../lib/session/ability.ts';
import { useActing } from '../lib/session/session.ts';
import { usePageTitle } from '../lib/use-page-title.ts';

/** One visit: its run sheet, and below it its source and signatures. */
export function VisitPage() {
  const { visitId = '' } = useParams();
  const { studyCode, studyState } = useActing();
  const may = useMay();
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
        {(sheet) => (
          <>
            <RunSheetView study={studyCode} sheet={sheet} />
            <div className="mt-4 flex flex-col gap-4" data-print="hide">
              {may('read', 'SourceDocument') && (
                <SourcePanel
                  study={studyCode}
                  visitId={visitId}
                  mayUpload={
                    sheet.visit.state !== 'planned' &&
                    studyState === 'running' &&
                    may('upload', 'SourceDocument')
                  }
                />
              )}
              {may('read', 'Signature') && (
                <SignaturePanel
                  study={studyCode}
                  visitId={visitId}
                  completed={sheet.visit.state === 'completed'}
                />
              )}
            </div>
          </>
        )}
      </Loaded>
    </>
  );
}
