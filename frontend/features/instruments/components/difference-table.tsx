import type { DifferenceDto } from '#schemas/api/instruments.ts';
import { DataTable, type Column } from '#frontend/components/data-table.tsx';
import { StateMark } from '#frontend/components/pen-mark.tsx';
import type { Loadable } from '#frontend/components/states.tsx';

const columns: Column<DifferenceDto>[] = [
  { header: 'What', cell: ({ subject, aspect }) => (aspect === null ? subject : `${subject}: ${aspect}`) },
  {
    header: 'Change',
    cell: ({ kind, breaking }) =>
      breaking ? <StateMark state="asks" word={`${kind}, breaks with earlier values`} /> : kind,
  },
  { header: 'Before', cell: ({ before }) => <Side text={before} /> },
  { header: 'After', cell: ({ after }) => <Side text={after} /> },
];

function Side({ text }: { text: string | null }) {
  if (text === null) return <span className="text-ink-soft">–</span>;
  return <span className="break-words whitespace-pre-wrap">{text}</span>;
}

/** What a version or a draft changes, told by the labels of the fields. */
export function DifferenceTable({
  query,
  empty,
}: {
  query: Loadable<readonly DifferenceDto[]>;
  empty: string;
}) {
  return (
    <DataTable
      caption="Differences"
      captionHidden
      columns={columns}
      query={query}
      rowKey={({ subject, aspect, kind }) => `${subject} ${aspect} ${kind}`}
      empty={{ title: empty }}
    />
  );
}
