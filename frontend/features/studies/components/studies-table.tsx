import { useInfiniteQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import type { StudyDto } from '#schemas/api/studies.ts';
import { Button } from '#frontend/components/button.tsx';
import { DataTable, type Column } from '#frontend/components/data-table.tsx';
import { StateMark } from '#frontend/components/pen-mark.tsx';
import { studiesQuery } from '../api/studies.ts';
import { studyMarks } from '../model/study-words.ts';

const columns: Column<StudyDto>[] = [
  {
    header: 'Study',
    cell: ({ id, name }) => (
      <Link to={`/administration/studies/${id}`} className="link">
        {name}
      </Link>
    ),
  },
  { header: 'Code', cell: ({ code }) => <span className="font-mono">{code}</span> },
  { header: 'Title', cell: ({ title }) => title },
  { header: 'State', cell: ({ state }) => <StateMark {...studyMarks[state]} /> },
  { header: 'Sites', cell: ({ sites }) => sites.map(({ code }) => code).join(', ') || 'none' },
];

/** Every study, for the administrator: what it is called and where it works, never its data. */
export function StudiesTable() {
  const query = useInfiniteQuery(studiesQuery);
  return (
    <>
      <DataTable
        caption="Studies"
        captionHidden
        name="studies"
        columns={columns}
        query={{
          data: query.data?.pages.flatMap(({ items }) => items),
          error: query.error,
          refetch: query.refetch,
        }}
        rowKey={({ id }) => id}
        empty={{
          title: 'There is no study yet',
          children: <p>Make the first one, then add its sites and members.</p>,
        }}
      />
      {query.hasNextPage && (
        <div className="border-t px-4 py-3">
          <Button busy={query.isFetchingNextPage} onClick={() => void query.fetchNextPage()}>
            Show more
          </Button>
        </div>
      )}
    </>
  );
}
