import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { Link, useParams } from 'react-router-dom';
import type { ParticipantDto } from '#schemas/api/participants.ts';
import { Breadcrumbs } from '../components/breadcrumbs.tsx';
import { Button } from '../components/button.tsx';
import { Card, PageHead } from '../components/card.tsx';
import { StateMark } from '../components/pen-mark.tsx';
import { Loaded } from '../components/states.tsx';
import { allocationQuery } from '../features/participants/api/allocation.ts';
import { participantQuery } from '../features/participants/api/participants.ts';
import { EmergencyOpening, OpeningNotice } from '../features/participants/components/emergency-opening.tsx';
import { IdentifiersPanel } from '../features/participants/components/identifiers-panel.tsx';
import { ParticipationSteps } from '../features/participants/components/participation-steps.tsx';
import { WithdrawDialog } from '../features/participants/components/withdraw-dialog.tsx';
import { participantMarks } from '../features/participants/model/participant-words.ts';
import { say } from '../lib/notices.ts';
import { useMay } from '../lib/session/ability.ts';
import { useActing } from '../lib/session/session.ts';
import { usePageTitle } from '../lib/use-page-title.ts';
import { ParticipantVisitsCard } from './participant-visits-card.tsx';

/** One participant, by code. */
export function ParticipantPage() {
  const { code = '' } = useParams();
  const { studyCode } = useActing();
  usePageTitle(`${code} · ${studyCode}`);
  const query = useQuery(participantQuery(studyCode, code));
  return (
    <>
      <Breadcrumbs
        crumbs={[{ label: 'Participants', to: `/studies/${studyCode}/participants` }, { label: code }]}
      />
      <Loaded query={query} lines={10}>
        {(participant) => (
          <Participant key={participant.id} studyCode={studyCode} participant={participant} />
        )}
      </Loaded>
    </>
  );
}

function Participant({ studyCode, participant }: { studyCode: string; participant: ParticipantDto }) {
  const may = useMay();
  const allocation = useQuery({ ...allocationQuery(studyCode), enabled: may('read', 'AllocationList') });
  const [withdrawing, setWithdrawing] = useState(false);
  const { code, siteCode, state, enrolledOn } = participant;
  const canWithdraw = state !== 'withdrawn' && may('update', 'Participant', participant);
  return (
    <>
      <PageHead
        title={<span className="font-mono">{code}</span>}
        note={
          <span className="flex flex-wrap items-center gap-x-3">
            <StateMark state={participantMarks[state]} word={state} />
            site {siteCode}, enrolled {enrolledOn}
          </span>
        }
        actions={
          <>
            <EmergencyOpening studyCode={studyCode} participant={participant} />
            {canWithdraw && (
              <Button variant="danger" onClick={() => setWithdrawing(true)}>
                Record a withdrawal
              </Button>
            )}
          </>
        }
      />
      <div className="flex flex-col gap-4">
        <OpeningNotice participant={participant} />
        <div className="grid items-start gap-4 lg:grid-cols-[minmax(0,1fr)_24rem]">
          <div className="flex flex-col gap-4">
            <ParticipationSteps
              studyCode={studyCode}
              participant={participant}
              allocated={(allocation.data?.sequences ?? 2) > 1}
            />
            {may('read', 'Visit') && (
              <ParticipantVisitsCard studyCode={studyCode} participant={participant} />
            )}
          </div>
          <div className="flex flex-col gap-4">
            <Withdrawal participant={participant} />
            <IdentifiersPanel studyCode={studyCode} participant={participant} />
            {may('read', 'AuditEvent') && (
              <Card title="Trail">
                <Link to={`/studies/${studyCode}/audit?participant=${participant.id}`} className="link">
                  All that was done for {code}
                </Link>
              </Card>
            )}
          </div>
        </div>
      </div>
      {withdrawing && (
        <WithdrawDialog
          studyCode={studyCode}
          participant={participant}
          onClose={() => setWithdrawing(false)}
          onDone={() => say(`${code}: withdrawal recorded`)}
        />
      )}
    </>
  );
}

function Withdrawal({ participant: { withdrawal } }: { participant: ParticipantDto }) {
  if (withdrawal === null) return null;
  return (
    <Card title="Withdrawal">
      <dl className="grid grid-cols-[auto_1fr] gap-x-5 gap-y-1.5">
        <dt className="text-ink-soft">Withdrew on</dt>
        <dd>{withdrawal.on}</dd>
        <dt className="text-ink-soft">Earlier data</dt>
        <dd>{withdrawal.earlierData === 'kept' ? 'kept in cuts' : 'left out of cuts made since'}</dd>
        <dt className="text-ink-soft">Safety follow-up</dt>
        <dd>{withdrawal.safetyFollowUp ? 'allowed' : 'not allowed'}</dd>
      </dl>
    </Card>
  );
}
