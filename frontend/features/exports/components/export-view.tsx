import { Link } from 'react-router-dom';
import type { ExportDto } from '#schemas/api/exports.ts';
import { Card, PageHead } from '../../../components/card.tsx';
import { StateMark } from '../../../components/pen-mark.tsx';
import { Progress } from '../../../components/progress.tsx';
import { formatMoment } from '../../../lib/format/dates.ts';
import { formatBytes } from '../../../lib/format/numbers.ts';
import { useZone } from '../../../lib/session/session.ts';
import { exportLook } from '../model/export-look.ts';
import { DisclosureReportView } from './disclosure-report.tsx';
import { ExportActs } from './export-acts.tsx';

/** One export from its request to its download. */
export function ExportView({ study, row }: { study: string; row: ExportDto }) {
  const zone = useZone();
  const moment = (at: string): string => formatMoment(at, zone);
  const lines: [string, string | null][] = [
    ['Purpose', row.purpose],
    ['Requested', `${row.requestedBy}, ${moment(row.requestedAt)}`],
    [
      row.state === 'refused' ? 'Refused' : 'Approved',
      row.decidedAt && `${row.decidedBy ?? ''}, ${moment(row.decidedAt)}`,
    ],
    ['Reason', row.decisionReason],
    [
      'Built',
      row.readyAt && `${moment(row.readyAt)}${row.size === null ? '' : `, ${formatBytes(row.size)}`}`,
    ],
    ['Can be downloaded until', row.state === 'ready' ? row.expiresAt && moment(row.expiresAt) : null],
    ['Downloaded', row.downloadedAt && moment(row.downloadedAt)],
    ['SHA-256', row.sha256],
  ];
  return (
    <>
      <PageHead
        title={`Export ${row.number}`}
        note={<Link to={`/studies/${study}/runs/${row.runId}`}>of run {row.report.runNumber}</Link>}
        actions={<ExportActs study={study} row={row} />}
      />
      <div className="flex flex-col gap-4">
        <Card>
          <div className="flex flex-col gap-3">
            <StateMark {...exportLook(row)} className="whitespace-normal!" />
            {row.progress !== null && (
              <Progress
                label="Building the export"
                done={row.progress.done}
                total={row.progress.total ?? undefined}
                noun="steps built"
              />
            )}
            {row.state === 'requested' && row.mine && (
              <p className="text-sm text-ink-soft">
                The principal investigator decides; nobody decides on their own request.
              </p>
            )}
            <dl className="grid grid-cols-[auto_1fr] gap-x-4 gap-y-1">
              {lines.map(
                ([name, words]) =>
                  words !== null && (
                    <div key={name} className="contents">
                      <dt className="text-sm text-ink-soft">{name}</dt>
                      <dd className={name === 'SHA-256' ? 'font-mono text-xs break-all' : undefined}>
                        {words}
                      </dd>
                    </div>
                  ),
              )}
            </dl>
          </div>
        </Card>
        <DisclosureReportView report={row.report} hash={row.reportHash} />
      </div>
    </>
  );
}
