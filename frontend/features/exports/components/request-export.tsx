import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { useNavigate } from 'react-router-dom';
import { Button } from '../../../components/button.tsx';
import { Card } from '../../../components/card.tsx';
import { ErrorSummary } from '../../../components/error-summary.tsx';
import { SelectField, TextareaField } from '../../../components/fields.tsx';
import { EmptyState, Loaded } from '../../../components/states.tsx';
import { useRefusals } from '../../../lib/use-refusals.ts';
import { useUrlState } from '../../../lib/use-url-state.ts';
import { exportableRunsQuery, useRequestExport } from '../api/exports.ts';

/** Least letters of a purpose. */
const purposeLength = 10;

/** Asks for the export of a run, with what it is for. */
export function RequestExport({ study }: { study: string }) {
  const query = useQuery(exportableRunsQuery(study));
  const request = useRequestExport(study);
  const navigate = useNavigate();
  const [chosen, setChosen] = useUrlState('run');
  const [purpose, setPurpose] = useState('');
  const [refused, run] = useRefusals();
  return (
    <Card title="Request an export" className="mb-4">
      <Loaded query={query} lines={3}>
        {(runs) => {
          if (runs.length === 0)
            return (
              <EmptyState title="No run can be exported yet">
                <p>Carry a plan out on a final cut; a rehearsal is never exported.</p>
              </EmptyState>
            );
          const runId = runs.find(({ id }) => id === chosen)?.id ?? runs[0]?.id ?? '';
          const handleRequest = async (): Promise<void> => {
            const { data } = await run(() => request.mutateAsync({ runId, purpose: purpose.trim() }));
            await navigate(`/studies/${study}/exports/${data.id}`);
          };
          return (
            <div className="flex max-w-3xl flex-col gap-4">
              {request.error !== null && <ErrorSummary error={request.error} />}
              <p>
                De-identified data of the run’s cut leave with its result. A disclosure report is made at
                once; the principal investigator reads it and decides.
              </p>
              <SelectField
                label="Run"
                required
                value={runId}
                onChange={(event) => setChosen(event.target.value)}
                choices={runs.map(({ id, number, plan, cut }) => ({
                  value: id,
                  label: `run ${number}, ${plan.name}${plan.version === null ? '' : ` v${plan.version}`}, cut ${cut.number}`,
                }))}
              />
              <TextareaField
                label="Purpose"
                required
                value={purpose}
                onChange={(event) => setPurpose(event.target.value)}
                error={refused['/purpose']}
                help="For whom and for what, in a sentence; it is kept in the register."
              />
              <div>
                <Button
                  variant="primary"
                  busy={request.isPending}
                  disabled={purpose.trim().length < purposeLength}
                  // What is refused stands in the summary above.
                  onClick={() => void handleRequest().catch(() => undefined)}
                >
                  Request the export
                </Button>
              </div>
            </div>
          );
        }}
      </Loaded>
    </Card>
  );
}
