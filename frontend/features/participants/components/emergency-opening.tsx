import { useState } from 'react';
import type { EmergencyOpeningDto, ParticipantDto } from '#schemas/api/participants.ts';
import { ActDialog } from '#frontend/components/act-dialog.tsx';
import { Button } from '#frontend/components/button.tsx';
import { Caution } from '#frontend/components/caution.tsx';
import { Dialog } from '#frontend/components/dialog.tsx';
import { formatMoment } from '#frontend/lib/format/dates.ts';
import { useMay } from '#frontend/lib/session/ability.ts';
import { useParticipantActs } from '../api/participants.ts';
import { useSiteZone } from './use-site-zone.ts';

interface EmergencyOpeningProps {
  studyCode: string;
  participant: ParticipantDto;
}

/** For the study physician alone: opens one participant's condition, in two steps, and shows it once. */
export function EmergencyOpening({ studyCode, participant }: EmergencyOpeningProps) {
  const may = useMay();
  const { openInEmergency } = useParticipantActs(studyCode, participant);
  const [step, setStep] = useState<'weigh' | 'open'>();
  const [opened, setOpened] = useState<EmergencyOpeningDto>();
  if (participant.allocation?.hidden !== true || !may('open', 'AllocationSlot', participant)) return null;
  const { code } = participant;

  return (
    <>
      <Button variant="danger" onClick={() => setStep('weigh')}>
        Open the condition in an emergency
      </Button>
      {step === 'weigh' && (
        <Dialog
          title={`Does treating ${code} depend on the condition?`}
          onClose={() => setStep(undefined)}
          footer={
            <>
              <Button onClick={() => setStep(undefined)}>Keep it sealed</Button>
              <Button variant="primary" onClick={() => setStep('open')}>
                It does: go on
              </Button>
            </>
          }
        >
          <p>
            If the answer would not change what you do next, leave it sealed: once opened, this participant is
            unblinded for good.
          </p>
          <Caution title="Research record, not a prescription">
            The condition is what the sealed list assigns, period by period. Whether it was given stands in
            the visits. Treatment follows your own judgement and local policy.
          </Caution>
        </Dialog>
      )}
      {step === 'open' && (
        <ActDialog
          title={`Open the condition of ${code}`}
          consequences={
            <p>
              You alone see it, now. The investigators and the monitor are told that it happened, not what you
              saw. Your name, the time and your reason stay on record.
            </p>
          }
          act="Open it"
          password
          onAct={async ({ reason, password = '' }) => setOpened(await openInEmergency({ reason, password }))}
          onClose={() => setStep(undefined)}
        />
      )}
      {opened !== undefined && (
        <Opened opened={opened} siteId={participant.siteId} onClose={() => setOpened(undefined)} />
      )}
    </>
  );
}

interface OpenedProps {
  opened: EmergencyOpeningDto;
  siteId: string;
  onClose: () => void;
}

/** What was opened, until it is closed; it is shown nowhere else. */
function Opened({ opened, siteId, onClose }: OpenedProps) {
  const zone = useSiteZone(siteId);
  return (
    <Dialog
      title={`${opened.code}: ${opened.sequence.label}`}
      onClose={onClose}
      footer={
        <Button variant="primary" onClick={onClose}>
          Close, and hide it again
        </Button>
      }
    >
      <dl className="grid grid-cols-[auto_1fr] gap-x-5 gap-y-1.5 text-base">
        {opened.periods.map(({ period, condition }) => (
          <div key={period} className="contents">
            <dt className="text-ink-soft">Period {period}</dt>
            <dd className="font-semibold text-soot">{condition.label}</dd>
          </div>
        ))}
      </dl>
      <p className="text-sm text-ink-soft">
        Opened {formatMoment(opened.openedAt, zone)}. To see it again, open it again: that too is written
        down.
      </p>
    </Dialog>
  );
}

/** Tells everybody that a condition was opened, and nothing of it. */
export function OpeningNotice({ participant }: { participant: ParticipantDto }) {
  const zone = useSiteZone(participant.siteId);
  const last = participant.emergencyOpenings.at(-1);
  if (last === undefined) return null;
  return (
    <Caution title="The condition was opened in an emergency">
      By {last.by} on {formatMoment(last.at, zone)}. What was seen stays with the study physician; everybody
      else goes on blinded.
    </Caution>
  );
}
