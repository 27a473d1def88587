import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import type { CutDto } from '#schemas/api/analysis.ts';
import { ActDialog } from '../components/act-dialog.tsx';
import { Button } from '../components/button.tsx';
import { Card, PageHead } from '../components/card.tsx';
import { DataTable, type Column } from '../components/data-table.tsx';
import { cutsQuery, useRequestCut } from '../features/analysis/api/analysis.ts';
import { JobProgress } from '../features/analysis/components/job-progress.tsx';
import { formatMoment } from '../lib/format/dates.ts';
import { useMay } from '../lib/session/ability.ts';
import { useActing } from '../lib/session/session.ts';
import { usePageTitle } from '../lib/use-page-title.ts';

/** The cuts of the study: frozen snapshots, each with its hash. */
export function CutsPage() {
  const { studyCode, studyState } = useActing();
  const may = useMay();
  usePageTitle(`Cuts · ${studyCode}`);
  const query = useQuery(cutsQuery(studyCode));
  const request = useRequestCut(studyCode);
  const [asking, setAsking] = useState<CutDto['kind'] | null>(null);
  const [jobKey, setJobKey] = useState<string | null>(null);
  const columns: Column<CutDto>[] = [
    { header: 'Cut', cell: ({ number }) => `Cut ${number}` },
    { header: 'Kind', cell: ({ kind }) => (kind === 'rehearsal' ? 'REHEARSAL' : 'final') },
    { header: 'Made from a study that was', cell: ({ studyStateThen }) => studyStateThen },
    { header: 'Made', cell: ({ madeBy, madeAt }) => `${madeBy}, ${formatMoment(madeAt)}` },
    {
      header: 'SHA-256',
      cell: ({ sha256 }) => <span className="font-mono text-xs break-all">{sha256}</span>,
    },
  ];
  return (
    <>
      <PageHead
        title="Cuts"
        note="frozen snapshots for analysis"
        actions={
          may('request', 'Cut') ? (
            <>
              <Button onClick={() => setAsking('rehearsal')}>Make a rehearsal cut</Button>
              <Button
                variant="primary"
                disabled={studyState !== 'unblinded'}
                onClick={() => setAsking('final')}
              >
                Make a final cut
              </Button>
            </>
          ) : undefined
        }
      />
      {jobKey !== null && (
        <Card className="mb-4">
          <JobProgress
            study={studyCode}
            jobKey={jobKey}
            label="The cut"
            noun="participants"
            onDone={() => void query.refetch()}
          />
        </Card>
      )}
      <Card flush>
        <DataTable
          caption="Cuts"
          captionHidden
          name="cuts"
          columns={columns}
          query={query}
          rowKey={({ id }) => id}
          empty={{
            title: 'No cut yet',
            children: <p>A rehearsal cut lets a plan be tried before unblinding; it tells nothing.</p>,
          }}
        />
      </Card>
      {asking !== null && (
        <ActDialog
          title={asking === 'rehearsal' ? 'Make a rehearsal cut' : 'Make a final cut'}
          act={asking === 'rehearsal' ? 'Make the rehearsal cut' : 'Make the final cut'}
          reasons={false}
          consequences={
            asking === 'rehearsal' ? (
              <p>
                Condition labels are flipped by chance for each participant, and values that would tell the
                condition are permuted within sites. It is marked REHEARSAL everywhere, and no number from it
                is a finding.
              </p>
            ) : (
              <p>The data as they stand are frozen with a hash. The cut cannot be changed or removed.</p>
            )
          }
          onAct={async () => setJobKey((await request.mutateAsync(asking)).data.jobKey)}
          onClose={() => setAsking(null)}
        />
      )}
    </>
  );
}
