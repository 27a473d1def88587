import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import type { InstrumentDto } from '#schemas/api/instruments.ts';
import { DataTable, type Column } from '#frontend/components/data-table.tsx';
import { StateMark } from '#frontend/components/pen-mark.tsx';
import { formatDate } from '#frontend/lib/format/dates.ts';
import { shortHash } from '#frontend/lib/format/numbers.ts';
import { instrumentsQuery } from '../api/instruments.ts';

const columns = (base: string, drafts: boolean): Column<InstrumentDto>[] => [
  {
    header: 'Instrument',
    cell: ({ key, title, newest }) => (
      <Link to={newest === null ? `${base}/${key}/draft` : `${base}/${key}`} className="link">
        {title}
      </Link>
    ),
    sortKey: 'title',
    sortValue: ({ title }) => title,
  },
  { header: 'Key', cell: ({ key }) => <span className="font-mono text-sm">{key}</span> },
  {
    header: 'Version',
    cell: ({ newest }) =>
      newest === null ? <StateMark state="todo" word="not published yet" /> : newest.version,
  },
  {
    header: 'Published',
    cell: ({ newest }) => (newest === null ? '–' : `${formatDate(newest.publishedAt)}, ${newest.authorName}`),
  },
  {
    header: 'Hash',
    cell: ({ newest }) =>
      newest === null ? '–' : <span className="font-mono text-sm">{shortHash(newest.hash)}</span>,
    optional: true,
  },
  ...(drafts ? [draftColumn(base)] : []),
];

const draftColumn = (base: string): Column<InstrumentDto> => ({
  header: 'Drafting table',
  cell: ({ key, draft }) =>
    draft?.changed ? (
      <Link to={`${base}/${key}/draft`} className="link">
        <StateMark state="underway" word={draft.baseVersion === null ? 'new draft' : 'changed draft'} />
      </Link>
    ) : (
      <span className="text-ink-soft">–</span>
    ),
});

/** The instruments of the study; for the investigator also what lies on the drafting table. */
export function InstrumentTable({ studyCode, drafts }: { studyCode: string; drafts: boolean }) {
  return (
    <DataTable
      caption="Instruments"
      captionHidden
      name="instruments"
      columns={columns(`/studies/${studyCode}/instruments`, drafts)}
      query={useQuery(instrumentsQuery(studyCode))}
      rowKey={({ key }) => key}
      empty={{
        title: 'No instrument yet',
        children: (
          <p>{drafts ? 'Begin with one of the library.' : 'The principal investigator publishes them.'}</p>
        ),
      }}
    />
  );
}
