import type { DisclosureReport } from '#schemas/api/exports.ts';
import { Card } from '../../../components/card.tsx';
import { DataTable, type Column } from '../../../components/data-table.tsx';
import { formatCount, shortHash } from '../../../lib/format/numbers.ts';

interface DisclosureReportProps {
  report: DisclosureReport;
  hash: string;
}

const fresh = <Row,>(data: readonly Row[]) => ({ data, error: null, refetch: () => undefined });

/** What would leave, in numbers: what a decision is made on. */
export function DisclosureReportView({ report, hash }: DisclosureReportProps) {
  const { participants, smallestGroup, alone, threshold, agesPooled } = report;
  const figures: [string, string, string][] = [
    ['Participants', formatCount(participants), 'whose rows leave'],
    [
      'Smallest group',
      formatCount(smallestGroup),
      `participants alike in all fields that may single out; the threshold is ${threshold}`,
    ],
    ['Alone in theirs', formatCount(alone), 'participants like no other in these fields'],
    ['Ages pooled', formatCount(agesPooled), 'given as a group only'],
  ];
  return (
    <Card
      title="Disclosure report"
      note={
        <>
          method {report.method} · cut <span className="font-mono">{shortHash(report.cutSha256)}</span> ·
          report <span className="font-mono">{shortHash(hash)}</span>
        </>
      }
    >
      <p className="mb-3 max-w-3xl">{report.sentence}</p>
      <dl className="mb-4 grid gap-4 sm:grid-cols-2 lg:grid-cols-4">
        {figures.map(([name, figure, note]) => (
          <div key={name}>
            <dt className="text-sm text-ink-soft">{name}</dt>
            <dd>
              <span className="text-xl font-semibold text-soot">{figure}</span>
              <span className="block text-sm text-ink-soft">{note}</span>
            </dd>
          </div>
        ))}
      </dl>
      <div className="flex flex-col gap-4">
        <DataTable
          caption="Instruments"
          columns={instrumentColumns}
          query={fresh(report.instruments)}
          rowKey={({ key, version }) => `${key} ${version}`}
          sortParam="instrument-sort"
          empty={{ title: 'No instrument leaves' }}
        />
        <DataTable
          caption="Fields that may single a person out, together with others"
          columns={treatmentColumns}
          query={fresh(report.quasiIdentifiers)}
          rowKey={({ field }) => field}
          sortParam="field-sort"
          empty={{ title: 'No such field leaves' }}
        />
        <DataTable
          caption="Fields that stay out"
          columns={leftOutColumns}
          query={fresh(report.leftOut)}
          rowKey={({ field }) => field}
          sortParam="left-out-sort"
          empty={{ title: 'No field is left out' }}
        />
      </div>
    </Card>
  );
}

const instrumentColumns: Column<DisclosureReport['instruments'][number]>[] = [
  { header: 'Instrument', cell: ({ key, version }) => `${key}, version ${version}` },
  { header: 'Rows', numeric: true, cell: ({ rows }) => formatCount(rows) },
  { header: 'Columns', numeric: true, cell: ({ columns }) => formatCount(columns) },
];

const treatmentColumns: Column<DisclosureReport['quasiIdentifiers'][number]>[] = [
  { header: 'Field', cell: ({ field }) => field },
  { header: 'What is done about it', cell: ({ treatment }) => treatment },
];

const leftOutColumns: Column<DisclosureReport['leftOut'][number]>[] = [
  { header: 'Field', cell: ({ field }) => field },
  { header: 'Why', cell: ({ why }) => why },
];
