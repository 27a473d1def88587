import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { useParams } from 'react-router-dom';
import { Breadcrumbs } from '../components/breadcrumbs.tsx';
import { Card, PageHead } from '../components/card.tsx';
import { EmptyState, Loaded } from '../components/states.tsx';
import { planQuery, planVersionsQuery, type SignedPlan } from '../features/analysis/api/analysis.ts';
import { PlanDocument } from '../features/analysis/components/plan-document.tsx';
import { PlanEditor } from '../features/analysis/components/plan-editor.tsx';
import { formatMoment } from '../lib/format/dates.ts';
import { useActing } from '../lib/session/session.ts';
import { usePageTitle } from '../lib/use-page-title.ts';

/** One plan that is being written. */
export function PlanPage() {
  const { planId = '' } = useParams();
  const { studyCode } = useActing();
  // What one types must not be replaced by what arrives: the editor starts anew only when asked to.
  const [loads, setLoads] = useState(0);
  const query = useQuery({ ...planQuery(studyCode, planId), refetchOnWindowFocus: false });
  const name = query.data?.name ?? 'Plan';
  usePageTitle(`${name} · ${studyCode}`);
  const handleReload = async (): Promise<void> => {
    await query.refetch();
    setLoads(loads + 1);
  };
  return (
    <>
      <PlanCrumbs study={studyCode} name={name} />
      <Loaded query={query} lines={12}>
        {(plan) => (
          <PlanEditor key={`${planId} ${loads}`} study={studyCode} plan={plan} onReload={handleReload} />
        )}
      </Loaded>
    </>
  );
}

/** One signed plan; it never changes. */
export function SignedPlanPage() {
  const { versionId = '' } = useParams();
  const { studyCode } = useActing();
  const query = useQuery(planVersionsQuery(studyCode));
  const plan = query.data?.find(({ id }) => id === versionId);
  const name = plan ? `${plan.name}, version ${plan.version}` : 'Signed plan';
  usePageTitle(`${name} · ${studyCode}`);
  return (
    <>
      <PlanCrumbs study={studyCode} name={name} />
      <Loaded query={query} lines={12}>
        {() =>
          plan === undefined ? (
            <EmptyState title="There is nothing here">
              <p>This plan does not exist, or is not yours to see.</p>
            </EmptyState>
          ) : (
            <SignedPlanView name={name} plan={plan} />
          )
        }
      </Loaded>
    </>
  );
}

function SignedPlanView({ name, plan }: { name: string; plan: SignedPlan }) {
  const { signedBy, signedAt, studyStateThen, hash, content } = plan;
  return (
    <>
      <PageHead
        title={name}
        note={`signed by ${signedBy}, ${formatMoment(signedAt)}, while the study was ${studyStateThen.replace('-', ' ')}`}
      />
      <Card>
        <PlanDocument content={content} />
        <p className="mt-4 font-mono text-xs break-all text-ink-soft">SHA-256 {hash}</p>
      </Card>
    </>
  );
}

function PlanCrumbs({ study, name }: { study: string; name: string }) {
  return <Breadcrumbs crumbs={[{ label: 'Plans', to: `/studies/${study}/plans` }, { label: name }]} />;
}
