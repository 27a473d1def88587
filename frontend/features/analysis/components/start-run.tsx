import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { Button } from '../../../components/button.tsx';
import { Card } from '../../../components/card.tsx';
import { ErrorSummary } from '../../../components/error-summary.tsx';
import { SelectField } from '../../../components/fields.tsx';
import { cutsQuery, plansQuery, planVersionsQuery, useRequestRun } from '../api/analysis.ts';

/** Carries a signed plan out on a cut, or rehearses a draft on a rehearsal cut. */
export function StartRun({ study }: { study: string }) {
  const cuts = useQuery(cutsQuery(study)).data ?? [];
  const versions = useQuery(planVersionsQuery(study)).data ?? [];
  const drafts = useQuery(plansQuery(study)).data ?? [];
  const run = useRequestRun(study);
  const [cutId, setCut] = useState('');
  const [planId, setPlan] = useState('');
  const cut = cuts.find(({ id }) => id === (cutId || cuts[0]?.id));
  const plans = [
    ...versions.map(({ id, name, version }) => ({
      value: `version ${id}`,
      label: `${name} v${version}, signed`,
    })),
    ...(cut?.kind === 'rehearsal'
      ? drafts.map(({ id, name }) => ({ value: `draft ${id}`, label: `${name}, draft` }))
      : []),
  ];
  const plan = plans.find(({ value }) => value === planId) ?? plans[0];
  if (cuts.length === 0) return null;
  const handleRun = (): void => {
    const [kind, id = ''] = (plan?.value ?? '').split(' ');
    if (cut === undefined || id === '') return;
    run.mutate({ cutId: cut.id, ...(kind === 'version' ? { planVersionId: id } : { planDraftId: id }) });
  };
  return (
    <Card title="Carry out a plan" className="mb-4">
      {run.error !== null && <ErrorSummary error={run.error} />}
      <div className="flex flex-wrap items-end gap-4">
        <SelectField
          label="Cut"
          value={cut?.id ?? ''}
          onChange={(event) => setCut(event.target.value)}
          choices={cuts.map(({ id, number, kind }) => ({ value: id, label: `cut ${number}, ${kind}` }))}
        />
        <SelectField
          label="Plan"
          value={plan?.value ?? ''}
          onChange={(event) => setPlan(event.target.value)}
          choices={plans}
        />
        <Button variant="primary" busy={run.isPending} disabled={plan === undefined} onClick={handleRun}>
          Run
        </Button>
      </div>
    </Card>
  );
}
