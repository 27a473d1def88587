import { useQuery } from '@tanstack/react-query';
import { Link, useParams } from 'react-router-dom';
import type { VisitDto } from '#schemas/api/capture.ts';
import { Breadcrumbs } from '../components/breadcrumbs.tsx';
import { PageHead } from '../components/card.tsx';
import { Loaded } from '../components/states.tsx';
import { verifiedVisitQuery } from '../features/monitoring/api/verification.ts';
import { VerificationDesk } from '../features/monitoring/components/verification-desk.tsx';
import { SourceChooser, useComparedSource } from '../features/source/components/source-chooser.tsx';
import { useActing } from '../lib/session/session.ts';
import { usePageTitle } from '../lib/use-page-title.ts';
import { useUrlState } from '../lib/use-url-state.ts';

/** One visit at the verification desk: its source at the left, its values at the right. */
export function VerificationVisitPage() {
  const { visitId = '' } = useParams();
  const { studyCode } = useActing();
  const query = useQuery(verifiedVisitQuery(studyCode, visitId));
  const visit = query.data;
  usePageTitle(visit ? `Verify ${visit.participantCode} · ${visit.label}` : 'Verification desk');
  return (
    <>
      <Breadcrumbs
        crumbs={[
          { label: 'Verification desk', to: `/studies/${studyCode}/verification` },
          { label: visit?.participantCode ?? 'Visit' },
        ]}
      />
      <Loaded query={query} lines={12}>
        {(loaded) => <Desk study={studyCode} visit={loaded} />}
      </Loaded>
    </>
  );
}

function Desk({ study, visit }: { study: string; visit: VisitDto }) {
  const [chosen, setChosen] = useUrlState('source');
  const sourceId = useComparedSource(study, visit.id, chosen);
  return (
    <>
      <PageHead
        title={`${visit.participantCode} · ${visit.label}`}
        note="compared with its source"
        actions={
          <Link to={`/studies/${study}/visits/${visit.id}`} className="link">
            To the run sheet
          </Link>
        }
      />
      <div className="grid items-start gap-4 md:grid-cols-2">
        <div className="min-w-0 md:sticky md:top-4">
          <SourceChooser study={study} visitId={visit.id} chosen={chosen} onChoose={setChosen} />
        </div>
        <div className="min-w-0">
          <VerificationDesk study={study} visit={visit} sourceId={sourceId} />
        </div>
      </div>
    </>
  );
}
