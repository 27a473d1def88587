import { PageHead } from '../components/card.tsx';
import { TrailView } from '../features/records/components/trail-view.tsx';
import { useMay } from '../lib/session/ability.ts';
import { useActing } from '../lib/session/session.ts';
import { usePageTitle } from '../lib/use-page-title.ts';

/** The study's trail: who did what, when, and why. */
export function AuditPage() {
  const { studyCode } = useActing();
  const may = useMay();
  usePageTitle(`Audit trail · ${studyCode}`);
  return (
    <>
      <PageHead title="Audit trail" note="newest first; nothing in it is ever removed" />
      <TrailView study={studyCode} byParticipant={may('read', 'Participant')} />
    </>
  );
}
