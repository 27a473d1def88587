import { useInfiniteQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import type { WorklistItemDto } from '#schemas/api/participants.ts';
import { Button } from '#frontend/components/button.tsx';
import { Card } from '#frontend/components/card.tsx';
import { Caution } from '#frontend/components/caution.tsx';
import { DataTable, type Column } from '#frontend/components/data-table.tsx';
import { worklistQuery } from '../api/allocation.ts';

const columns = (studyCode: string): Column<WorklistItemDto>[] => [
  {
    header: 'Participant',
    cell: ({ code }) => (
      <Link to={`/studies/${studyCode}/participants/${code}`} className="font-mono link">
        {code}
      </Link>
    ),
  },
  { header: 'Site', cell: ({ siteCode }) => siteCode },
  { header: 'Period', numeric: true, cell: ({ period }) => period },
  {
    header: 'To give',
    cell: ({ condition }) => <strong className="font-semibold">{condition.label}</strong>,
  },
  { header: 'To do for the laboratory', cell: ({ visits }) => <Steps visits={visits} /> },
];

/** What the unblinded technician prepares and takes, participant by participant and period by period. */
export function Worklist({ studyCode }: { studyCode: string }) {
  const query = useInfiniteQuery(worklistQuery(studyCode));
  const rows = query.data?.pages.flatMap(({ items }) => items);
  return (
    <Card title="Worklist" flush>
      <div className="px-4 pt-1 pb-3">
        <Caution title="This tells the condition">
          Keep it from the sight of the team next door: no print left lying, no word, no colour on the bags.
        </Caution>
      </div>
      <DataTable
        caption="What to give and to take"
        captionHidden
        columns={columns(studyCode)}
        query={{ data: rows, error: query.error, refetch: query.refetch }}
        rowKey={({ participantId, period }) => `${participantId} ${period}`}
        empty={{
          title: 'No place is assigned yet',
          children: <p>Participants appear here as they are assigned.</p>,
        }}
      />
      {query.hasNextPage && (
        <div className="border-t px-4 py-3">
          <Button busy={query.isFetchingNextPage} onClick={() => void query.fetchNextPage()}>
            Show more
          </Button>
        </div>
      )}
    </Card>
  );
}

function Steps({ visits }: Pick<WorklistItemDto, 'visits'>) {
  if (visits.every(({ steps }) => steps.length === 0)) return <>–</>;
  return (
    <ul>
      {visits.map(({ key, label, steps }) => (
        <li key={key}>
          <span className="text-ink-soft">{label}: </span>
          {steps.map((step) => `${step.label} (minute ${step.plannedMinute})`).join(', ')}
        </li>
      ))}
    </ul>
  );
}
