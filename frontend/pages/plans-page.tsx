import { Card, PageHead } from '../components/card.tsx';
import { NewPlanButton } from '../features/analysis/components/plan-new.tsx';
import { PlanDraftTable, SignedPlanTable } from '../features/analysis/components/plan-table.tsx';
import { useMay } from '../lib/session/ability.ts';
import { useActing } from '../lib/session/session.ts';
import { usePageTitle } from '../lib/use-page-title.ts';

/** The plans of the study: those being written, for those who write them, and the signed ones. */
export function PlansPage() {
  const { studyCode } = useActing();
  const may = useMay();
  usePageTitle(`Plans · ${studyCode}`);
  return (
    <>
      <PageHead
        title="Plans"
        note="decided before the data are seen"
        actions={may('create', 'PlanDraft') ? <NewPlanButton study={studyCode} /> : undefined}
      />
      <div className="flex flex-col gap-4">
        {may('read', 'PlanDraft') && (
          <Card flush>
            <PlanDraftTable study={studyCode} />
          </Card>
        )}
        <Card flush>
          <SignedPlanTable study={studyCode} />
        </Card>
      </div>
    </>
  );
}
