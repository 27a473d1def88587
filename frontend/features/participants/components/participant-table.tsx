import { useInfiniteQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import type { ParticipantDto } from '#schemas/api/participants.ts';
import { Button } from '#frontend/components/button.tsx';
import { DataTable, type Column } from '#frontend/components/data-table.tsx';
import { HiddenValue, StateMark } from '#frontend/components/pen-mark.tsx';
import { participantsQuery, type ParticipantFilters } from '../api/participants.ts';
import { participantMarks } from '../model/participant-words.ts';

const columns = (studyCode: string): Column<ParticipantDto>[] => [
  {
    header: 'Code',
    cell: ({ code }) => (
      <Link to={`/studies/${studyCode}/participants/${code}`} className="font-mono link">
        {code}
      </Link>
    ),
  },
  { header: 'Site', cell: ({ siteCode }) => siteCode },
  { header: 'State', cell: ({ state }) => <StateMark state={participantMarks[state]} word={state} /> },
  { header: 'Enrolled', cell: ({ enrolledOn }) => enrolledOn },
  { header: 'Consented', cell: ({ consentedOn }) => consentedOn ?? '–', optional: true },
  { header: 'Visits', cell: ({ visits }) => visitsInWords(visits) },
  {
    header: 'Condition',
    cell: ({ allocation }) => {
      if (allocation === null) return '–';
      return allocation.hidden ? <HiddenValue word="assigned · hidden" /> : allocation.sequence.label;
    },
  },
  {
    header: 'Emergency opening',
    cell: ({ emergencyOpenings }) => (emergencyOpenings.length === 0 ? '–' : `${emergencyOpenings.length}`),
    optional: true,
  },
];

function visitsInWords({ completed, planned, missed }: ParticipantDto['visits']): string {
  if (planned === 0) return 'none planned';
  return `${completed} of ${planned}${missed > 0 ? `, ${missed} missed` : ''}`;
}

/** Participants by code, a page after the other; who they are is nowhere in it. */
export function ParticipantTable({ studyCode, filters }: { studyCode: string; filters: ParticipantFilters }) {
  const query = useInfiniteQuery(participantsQuery(studyCode, filters));
  const filtered = Object.values(filters).some((value) => value !== '');
  const rows = query.data?.pages.flatMap(({ items }) => items);
  return (
    <>
      <DataTable
        caption="Participants"
        captionHidden
        name="participants"
        columns={columns(studyCode)}
        query={{ data: rows, error: query.error, refetch: query.refetch }}
        rowKey={({ id }) => id}
        empty={
          filtered
            ? { title: 'No participant fits these filters', children: <p>Widen them, or clear the code.</p> }
            : {
                title: 'Nobody is enrolled yet',
                children: <p>A coordinator enrols the first participant.</p>,
              }
        }
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
