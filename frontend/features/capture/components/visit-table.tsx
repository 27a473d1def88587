import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { Link } from 'react-router-dom';
import type { VisitDto } from '#schemas/api/capture.ts';
import { ActDialog } from '../../../components/act-dialog.tsx';
import { Button } from '../../../components/button.tsx';
import { DataTable, type Column } from '../../../components/data-table.tsx';
import { TextField } from '../../../components/fields.tsx';
import { StateMark } from '../../../components/pen-mark.tsx';
import type { Loadable } from '../../../components/states.tsx';
import { useMay } from '../../../lib/session/ability.ts';
import { runSheetQuery, useVisitAct } from '../api/visits.ts';
import { visitLook } from './visit-look.ts';

interface VisitTableProps {
  study: string;
  query: Loadable<readonly VisitDto[]>;
}

/** Visits by planned day, each with what may be done about it. */
export function VisitTable({ study, query }: VisitTableProps) {
  const columns: Column<VisitDto>[] = [
    {
      header: 'Participant',
      sortKey: 'participant',
      sortValue: ({ participantCode }) => participantCode,
      cell: ({ id, participantCode }) => (
        <Link to={`/studies/${study}/visits/${id}`} className="font-mono link">
          {participantCode}
        </Link>
      ),
    },
    { header: 'Visit', cell: ({ label }) => label },
    {
      header: 'Planned',
      sortKey: 'planned',
      sortValue: ({ plannedOn }) => plannedOn,
      cell: ({ plannedOn }) => plannedOn,
    },
    { header: 'Window', cell: ({ windowFrom, windowTo }) => `${windowFrom} to ${windowTo}` },
    { header: 'State', cell: (visit) => <StateMark {...visitLook(visit)} /> },
    {
      header: 'Acts',
      cell: (visit) => <VisitActs study={study} visit={visit} />,
    },
  ];
  return (
    <DataTable
      caption="Visits"
      captionHidden
      name="visits"
      columns={columns}
      query={query}
      rowKey={({ id }) => id}
      defaultSort="planned"
      empty={{
        title: 'No visit here',
        children: <p>Plan one from a participant’s page, or widen the filter.</p>,
      }}
      rowState={({ overdue }) => (overdue ? 'asks' : undefined)}
    />
  );
}

function VisitActs({ study, visit }: { study: string; visit: VisitDto }) {
  const may = useMay();
  const act = useVisitAct(study, visit);
  const [dialog, setDialog] = useState<'move' | 'missed' | null>(null);
  const [day, setDay] = useState(visit.plannedOn);
  // The reasons are those of the protocol version that the visit follows.
  const sheet = useQuery({ ...runSheetQuery(study, visit.id), enabled: dialog === 'missed' });
  if (visit.state !== 'planned' || !may('create', 'Visit')) return null;
  return (
    <span className="flex flex-wrap gap-2">
      <Button variant="quiet" onClick={() => setDialog('move')}>
        Reschedule<span className="sr-only"> {visit.participantCode}</span>
      </Button>
      <Button variant="quiet" onClick={() => setDialog('missed')}>
        Missed<span className="sr-only"> {visit.participantCode}</span>
      </Button>
      {dialog === 'move' && (
        <ActDialog
          title={`Reschedule ${visit.participantCode}, ${visit.label}`}
          act="Reschedule"
          consequences={
            <p>
              The visit moves; its window stays {visit.windowFrom} to {visit.windowTo}, and a visit outside it
              shows as early or late.
            </p>
          }
          onAct={({ reason }) => act.mutateAsync({ path: 'rescheduling', body: { plannedOn: day, reason } })}
          onClose={() => setDialog(null)}
        >
          <TextField
            label="New day"
            type="date"
            required
            value={day}
            onChange={(event) => setDay(event.target.value)}
          />
        </ActDialog>
      )}
      {dialog === 'missed' && sheet.data !== undefined && (
        <ActDialog
          title={`Record as missed: ${visit.participantCode}, ${visit.label}`}
          act="Record as missed"
          consequences={
            <p>The visit will not take place. Its measures count as missing, with this reason.</p>
          }
          reasons={sheet.data.missedVisitReasons}
          onAct={({ reason }) => {
            const [missedReason = '', ...note] = reason.split(': ');
            const words = note.join(': ');
            return act.mutateAsync({
              path: 'missing',
              body: { missedReason, ...(words === '' ? {} : { note: words }) },
            });
          }}
          onClose={() => setDialog(null)}
        />
      )}
    </span>
  );
}
