import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import type { RunDto } from '#schemas/api/analysis.ts';
import { Card, PageHead } from '../components/card.tsx';
import { DataTable, type Column } from '../components/data-table.tsx';
import { StateMark, type PenState } from '../components/pen-mark.tsx';
import { runsQuery } from '../features/analysis/api/analysis.ts';
import { StartRun } from '../features/analysis/components/start-run.tsx';
import { formatMoment } from '../lib/format/dates.ts';
import { useMay } from '../lib/session/ability.ts';
import { useActing } from '../lib/session/session.ts';
import { usePageTitle } from '../lib/use-page-title.ts';

const marks: Record<RunDto['state'], PenState> = {
  waiting: 'todo',
  running: 'underway',
  done: 'settled',
  failed: 'asks',
  cancelled: 'late',
};

/** Every run; none is ever removed. */
export function RunsPage() {
  const { studyCode } = useActing();
  const may = useMay();
  usePageTitle(`Runs · ${studyCode}`);
  const query = useQuery(runsQuery(studyCode));
  const columns: Column<RunDto>[] = [
    {
      header: 'Run',
      cell: ({ id, number }) => <Link to={`/studies/${studyCode}/runs/${id}`}>Run {number}</Link>,
    },
    {
      header: 'Plan',
      cell: ({ plan }) => `${plan.name}${plan.version === null ? ', draft' : ` v${plan.version}`}`,
    },
    { header: 'Cut', cell: ({ cut }) => `${cut.number}, ${cut.kind}` },
    { header: 'Stands as', cell: ({ standing }) => standing.replace('-', ' ') },
    { header: 'State', cell: ({ state }) => <StateMark state={marks[state]} word={state} /> },
    {
      header: 'Asked for',
      cell: ({ requestedBy, requestedAt }) => `${requestedBy}, ${formatMoment(requestedAt)}`,
    },
  ];
  return (
    <>
      <PageHead title="Runs" note="a plan carried out on a cut" />
      {may('run', 'PlanVersion') && <StartRun study={studyCode} />}
      <Card flush>
        <DataTable
          caption="Runs"
          captionHidden
          name="runs"
          columns={columns}
          query={query}
          rowKey={({ id }) => id}
          empty={{
            title: 'No run yet',
            children: <p>Sign a plan and make a cut; then carry the plan out on it.</p>,
          }}
        />
      </Card>
    </>
  );
}
