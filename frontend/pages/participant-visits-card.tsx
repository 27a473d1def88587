import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import type { ParticipantDto } from '#schemas/api/participants.ts';
import { Button } from '../components/button.tsx';
import { Card } from '../components/card.tsx';
import { VisitTable } from '../features/capture/components/visit-table.tsx';
import { visitsQuery } from '../features/participants/api/participants.ts';
import { PlanVisitDialog } from '../features/participants/components/plan-visit-dialog.tsx';
import { protocolVersionQuery } from '../features/protocol/api/protocol.ts';
import { say } from '../lib/notices.ts';
import { useMay } from '../lib/session/ability.ts';

/** The visits of a participant, what may be done about each, and the planning of the next. */
export function ParticipantVisitsCard({
  studyCode,
  participant,
}: {
  studyCode: string;
  participant: ParticipantDto;
}) {
  const may = useMay();
  const visits = useQuery(visitsQuery(studyCode, participant.id));
  const protocol = useQuery(protocolVersionQuery(studyCode, participant.protocolVersionId));
  const [planning, setPlanning] = useState(false);
  const planned = visits.data?.map(({ visitTypeKey }) => visitTypeKey);
  const open = protocol.data?.content.visitTypes.filter(({ key }) => planned?.includes(key) === false) ?? [];
  const canPlan = participant.state !== 'withdrawn' && open.length > 0 && may('create', 'Visit', participant);
  return (
    <Card
      title="Visits"
      flush
      actions={canPlan && <Button onClick={() => setPlanning(true)}>Plan a visit</Button>}
    >
      <VisitTable study={studyCode} query={visits} />
      {planning && (
        <PlanVisitDialog
          studyCode={studyCode}
          participant={participant}
          visitTypes={open}
          onClose={() => setPlanning(false)}
          onDone={() => say(`${participant.code}: visit planned`)}
        />
      )}
    </Card>
  );
}
