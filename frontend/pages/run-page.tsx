import { useQuery } from '@tanstack/react-query';
import { useParams } from 'react-router-dom';
import type { RunDto } from '#schemas/api/analysis.ts';
import { Breadcrumbs } from '../components/breadcrumbs.tsx';
import { ButtonLink } from '../components/button.tsx';
import { Card, PageHead } from '../components/card.tsx';
import { Loaded } from '../components/states.tsx';
import { isUnderWay, resultQuery, runQuery } from '../features/analysis/api/analysis.ts';
import { Answer } from '../features/analysis/components/answer.tsx';
import { JobProgress } from '../features/analysis/components/job-progress.tsx';
import { PairedPlot } from '../features/analysis/components/paired-plot.tsx';
import { Reproduce, ResultCautions } from '../features/analysis/components/reproduce.tsx';
import {
  LawTable,
  LeftOutTable,
  RatioTable,
  ShareCard,
  TwinTable,
} from '../features/analysis/components/result-tables.tsx';
import { SplitChart } from '../features/analysis/components/split-chart.tsx';
import { shortHash } from '../lib/format/numbers.ts';
import { useMay } from '../lib/session/ability.ts';
import { useActing } from '../lib/session/session.ts';
import { usePageTitle } from '../lib/use-page-title.ts';

/** One run: the sentence first, then the split, the plots, the tables, and how to reproduce it. */
export function RunPage() {
  const { runId = '' } = useParams();
  const { studyCode } = useActing();
  const query = useQuery(runQuery(studyCode, runId));
  usePageTitle(query.data ? `Run ${query.data.number} · ${studyCode}` : 'Run');
  return (
    <>
      <Breadcrumbs
        crumbs={[
          { label: 'Runs', to: `/studies/${studyCode}/runs` },
          { label: query.data ? `Run ${query.data.number}` : 'Run' },
        ]}
      />
      <Loaded query={query} lines={10}>
        {(run) => <RunView study={studyCode} run={run} onEnded={() => void query.refetch()} />}
      </Loaded>
    </>
  );
}

function RunView({ study, run, onEnded }: { study: string; run: RunDto; onEnded: () => void }) {
  const may = useMay();
  return (
    <>
      <PageHead
        title={`Run ${run.number} · ${run.plan.name}${run.plan.version === null ? ' (draft)' : ` v${run.plan.version}`}`}
        note={`cut ${run.cut.number} · ${shortHash(run.cut.sha256)} · engine ${run.engineVersion} · seed ${run.seed}`}
        actions={
          run.state === 'done' && run.cut.kind === 'final' && may('request', 'ExportRequest') ? (
            <ButtonLink variant="primary" to={`/studies/${study}/exports?run=${run.id}`}>
              Request an export
            </ButtonLink>
          ) : undefined
        }
      />
      {isUnderWay(run) && (
        <Card>
          <JobProgress study={study} jobKey={run.id} label="This run" noun="steps" onDone={onEnded} />
        </Card>
      )}
      {run.state === 'failed' && (
        <Card title="The run has no result">
          <p>{run.failure ?? 'It failed; ask for it again.'}</p>
        </Card>
      )}
      {run.state === 'done' && <ResultView study={study} run={run} />}
    </>
  );
}

function ResultView({ study, run }: { study: string; run: RunDto }) {
  const query = useQuery(resultQuery(study, run.id));
  const name = `run-${run.number}`;
  return (
    <Loaded query={query} lines={14}>
      {(result) => (
        <div className="flex flex-col gap-4">
          <Answer run={run} result={result} />
          <div className="grid items-start gap-4 xl:grid-cols-2">
            <div className="flex min-w-0 flex-col gap-4">
              <Card>
                <SplitChart result={result} name={`${name}-split`} />
              </Card>
              <LeftOutTable result={result} />
            </div>
            <div className="flex min-w-0 flex-col gap-4">
              <RatioTable result={result} />
              <ShareCard result={result} />
              <LawTable result={result} />
              {result.effects.map(({ outcome }) => (
                <Card key={outcome}>
                  <PairedPlot result={result} outcome={outcome} name={name} />
                </Card>
              ))}
              <TwinTable result={result} />
              <ResultCautions result={result} />
              <Reproduce run={run} result={result} />
            </div>
          </div>
        </div>
      )}
    </Loaded>
  );
}
