import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import { Card } from '#frontend/components/card.tsx';
import { StateMark } from '#frontend/components/pen-mark.tsx';
import { EmptyState, Loaded } from '#frontend/components/states.tsx';
import { visitsQuery } from '../api/participants.ts';
import { visitMark } from '../model/participant-words.ts';

/** The visits of a participant, each with its window and state. */
export function ParticipantVisits({
  studyCode,
  participantId,
}: {
  studyCode: string;
  participantId: string;
}) {
  const query = useQuery(visitsQuery(studyCode, participantId));
  return (
    <Card title="Visits" flush>
      <Loaded query={query}>
        {(visits) =>
          visits.length === 0 ? (
            <EmptyState title="No visit is planned yet">
              <p>The first one is planned from the visit ribbon.</p>
            </EmptyState>
          ) : (
            <ul className="divide-y divide-rule-soft pt-1">
              {visits.map((visit) => (
                <li key={visit.id} className="flex flex-wrap items-center gap-x-4 gap-y-1 px-4 py-3">
                  <StateMark {...visitMark(visit)} className="w-28" />
                  <Link to={`/studies/${studyCode}/visits/${visit.id}`} className="min-w-40 flex-1 link">
                    {visit.label}
                  </Link>
                  <span className="text-sm text-ink-soft">
                    planned {visit.plannedOn}, window {visit.windowFrom} to {visit.windowTo}
                  </span>
                </li>
              ))}
            </ul>
          )
        }
      </Loaded>
    </Card>
  );
}
