import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { ActDialog } from '#frontend/components/act-dialog.tsx';
import { Button } from '#frontend/components/button.tsx';
import { Card } from '#frontend/components/card.tsx';
import { Loaded } from '#frontend/components/states.tsx';
import { StateMark } from '#frontend/components/pen-mark.tsx';
import { say } from '#frontend/lib/notices.ts';
import { useMay } from '#frontend/lib/session/ability.ts';
import { enrolmentQuery, useProtocolActs } from '../api/protocol.ts';

/** Whether the study is open for enrolment; the investigator opens it when nothing stands against it. */
export function EnrolmentCard({ studyCode, studyId }: { studyCode: string; studyId: string }) {
  const query = useQuery(enrolmentQuery(studyCode));
  const { openEnrolment } = useProtocolActs(studyCode);
  const mayOpen = useMay()('open', 'Study', { id: studyId });
  const [opening, setOpening] = useState(false);
  return (
    <Card title="Enrolment">
      <Loaded query={query}>
        {({ state, openPoints, revision }) => (
          <div className="flex flex-col items-start gap-3">
            {state === 'setting-up' ? (
              <StateMark state="todo" word="not open yet" />
            ) : (
              <StateMark state={state === 'running' ? 'underway' : 'settled'} word={words[state]} />
            )}
            {openPoints.length > 0 && (
              <ul className="list-disc pl-5">
                {openPoints.map((point) => (
                  <li key={point}>{point}</li>
                ))}
              </ul>
            )}
            {state === 'setting-up' && mayOpen && (
              <Button
                variant="primary"
                disabled={openPoints.length > 0}
                aria-describedby={openPoints.length > 0 ? 'enrolment-why' : undefined}
                onClick={() => setOpening(true)}
              >
                Open the study for enrolment
              </Button>
            )}
            {openPoints.length > 0 && mayOpen && (
              <p id="enrolment-why" className="text-sm text-ink-soft">
                Possible once the points above are settled.
              </p>
            )}
            {opening && (
              <ActDialog
                title="Open the study for enrolment"
                act="Open for enrolment"
                consequences={
                  <p>
                    The study goes from setting-up to running, once and for all. Participants are enrolled
                    under the newest protocol and its published instruments; the time zones of the sites are
                    fixed.
                  </p>
                }
                onAct={async ({ reason }) => {
                  await openEnrolment(reason, revision);
                  say('The study is open for enrolment');
                }}
                onClose={() => setOpening(false)}
              />
            )}
          </div>
        )}
      </Loaded>
    </Card>
  );
}

const words = {
  running: 'open for enrolment',
  locked: 'closed: the study is locked',
  unblinded: 'closed: the study is unblinded',
} as const;
