import { useState } from 'react';
import type { UnblindingDto } from '#schemas/api/participants.ts';
import { ActDialog } from '#frontend/components/act-dialog.tsx';
import { Button } from '#frontend/components/button.tsx';
import { Card } from '#frontend/components/card.tsx';
import { StateMark, type PenState } from '#frontend/components/pen-mark.tsx';
import { formatMoment } from '#frontend/lib/format/dates.ts';
import { say } from '#frontend/lib/notices.ts';
import { useMay } from '#frontend/lib/session/ability.ts';
import { useZone } from '#frontend/lib/session/session.ts';
import { useAllocationActs } from '../api/allocation.ts';
import { unblindingSteps } from '../model/unblinding-steps.ts';

/** Lock, first hand, second hand: what is done, who did it, and what is next. */
export function UnblindingSteps({ studyCode, unblinding }: { studyCode: string; unblinding: UnblindingDto }) {
  const may = useMay();
  const zone = useZone();
  const [dialog, setDialog] = useState<'ask' | 'confirm'>();
  const { requestUnblinding, confirmUnblinding } = useAllocationActs(studyCode);
  const { request } = unblinding;
  const labels = { ask: 'Ask for the unblinding', confirm: 'Confirm the unblinding' } as const;

  return (
    <Card title="Two people, one after the other" flush>
      <ol className="divide-y divide-rule-soft pt-1">
        {unblindingSteps(unblinding, (instant) => formatMoment(instant, zone)).map(
          ({ title, mark, word, detail, act }) => (
            <li key={title} className="flex flex-wrap items-center gap-x-4 gap-y-1.5 px-4 py-3">
              <StateMark state={mark satisfies PenState} word={word} className="w-28" />
              <div className="min-w-48 flex-1">
                <h3 className="text-base">{title}</h3>
                <p className="text-sm text-ink-soft">{detail}</p>
              </div>
              {act !== null && may('unblind', 'Study') && (
                <Button variant="primary" onClick={() => setDialog(act)}>
                  {labels[act]}
                </Button>
              )}
            </li>
          ),
        )}
      </ol>
      {dialog === 'ask' && (
        <ActDialog
          title="Ask for the unblinding of the study"
          consequences={
            <p>Another person who may unblind is told, and has to confirm. Until then nothing is opened.</p>
          }
          act="Ask for it"
          password
          onAct={async ({ reason, password = '' }) => {
            await requestUnblinding({ reason, password });
            say('Unblinding asked for; another person has to confirm it');
          }}
          onClose={() => setDialog(undefined)}
        />
      )}
      {dialog === 'confirm' && request !== null && (
        <ActDialog
          title="Unblind the study"
          consequences={
            <p>
              {request.by} asked for this: “{request.reason}”. With your signature every condition and every
              hidden value is open to all members of the study, for good. The data stay locked.
            </p>
          }
          act="Unblind the study"
          reasons={false}
          password
          onAct={async ({ password = '' }) => {
            await confirmUnblinding(password, request.revision);
            say('The study is unblinded');
          }}
          onClose={() => setDialog(undefined)}
        />
      )}
    </Card>
  );
}
