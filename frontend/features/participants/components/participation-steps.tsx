import { useState } from 'react';
import type { ParticipantDto } from '#schemas/api/participants.ts';
import { Button } from '#frontend/components/button.tsx';
import { Card } from '#frontend/components/card.tsx';
import { StateMark } from '#frontend/components/pen-mark.tsx';
import { say } from '#frontend/lib/notices.ts';
import { useMay } from '#frontend/lib/session/ability.ts';
import { participationSteps, type StepKey } from '../model/participation-steps.ts';
import { AssignPlaceDialog } from './assign-place-dialog.tsx';
import { ConfirmCriteriaDialog } from './confirm-criteria-dialog.tsx';

interface ParticipationStepsProps {
  studyCode: string;
  participant: ParticipantDto;
  /** Whether the protocol has more than one sequence. */
  allocated: boolean;
}

/** Consent, criteria, place, visits: what is on record, what is next, and why the rest is closed. */
export function ParticipationSteps({ studyCode, participant, allocated }: ParticipationStepsProps) {
  const may = useMay();
  const [shown, setShown] = useState<StepKey>();
  const acts: Partial<Record<StepKey, string>> = {
    ...(may('update', 'Participant', participant) ? { criteria: 'Confirm the criteria' } : {}),
    ...(may('assign', 'Participant', participant) ? { place: 'Assign the next place' } : {}),
  };
  const close = () => setShown(undefined);

  return (
    <Card title="Taking part" flush>
      <ol className="divide-y divide-rule-soft pt-1">
        {participationSteps(participant, allocated).map(({ key, title, mark, word, detail, open }) => (
          <li key={key} className="flex flex-wrap items-center gap-x-4 gap-y-1.5 px-4 py-3">
            <StateMark state={mark} word={word} className="w-28" />
            <div className="min-w-48 flex-1">
              <h3 className="text-base">{title}</h3>
              <p className="text-sm text-ink-soft">{detail}</p>
            </div>
            {open && acts[key] !== undefined && (
              <Button variant="primary" onClick={() => setShown(key)}>
                {acts[key]}
              </Button>
            )}
          </li>
        ))}
      </ol>
      {shown === 'criteria' && (
        <ConfirmCriteriaDialog
          studyCode={studyCode}
          participant={participant}
          onClose={close}
          onDone={() => say(`${participant.code}: criteria confirmed`)}
        />
      )}
      {shown === 'place' && (
        <AssignPlaceDialog
          studyCode={studyCode}
          participant={participant}
          onClose={close}
          onDone={() => say(`${participant.code}: place assigned`)}
        />
      )}
    </Card>
  );
}
