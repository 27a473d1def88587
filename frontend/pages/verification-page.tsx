import { Card, PageHead } from '../components/card.tsx';
import { VerificationList } from '../features/monitoring/components/verification-list.tsx';
import { useActing } from '../lib/session/session.ts';
import { usePageTitle } from '../lib/use-page-title.ts';

/** The completed visits, to be compared with their source. */
export function VerificationPage() {
  const { studyCode } = useActing();
  usePageTitle(`Verification desk · ${studyCode}`);
  return (
    <>
      <PageHead title="Verification desk" note="completed visits" />
      <Card flush>
        <VerificationList study={studyCode} />
      </Card>
    </>
  );
}
