import { PageHead } from '../components/card.tsx';
import { TrailView } from '../features/records/components/trail-view.tsx';
import { usePageTitle } from '../lib/use-page-title.ts';

/** The system's trail: accounts, memberships, sign-ins. */
export function SystemAuditPage() {
  usePageTitle('System trail');
  return (
    <>
      <PageHead title="System trail" note="accounts, memberships and sign-ins, newest first" />
      <TrailView study={null} byParticipant={false} />
    </>
  );
}
