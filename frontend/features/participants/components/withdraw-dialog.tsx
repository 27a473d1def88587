import { useId, useState } from 'react';
import type { EarlierData } from '#schemas/participants/withdrawal.ts';
import { ActDialog } from '#frontend/components/act-dialog.tsx';
import { RadioField, TextField } from '#frontend/components/fields.tsx';
import { formatDate } from '#frontend/lib/format/dates.ts';
import { useParticipantActs } from '../api/participants.ts';
import type { ParticipantDialogProps } from './confirm-criteria-dialog.tsx';
import { useSiteZone } from './use-site-zone.ts';

const reasons = ['Own wish', 'Criteria not met', 'Adverse event', 'Moved away', 'Cannot be reached'];

/** Records a withdrawal: when, why, and what the participant chose for the data taken before it (CP-03). */
export function WithdrawDialog({ studyCode, participant, onClose, onDone }: ParticipantDialogProps) {
  const { withdraw } = useParticipantActs(studyCode, participant);
  const zone = useSiteZone(participant.siteId);
  const names = { data: useId(), safety: useId() };
  const [withdrawnOn, setWithdrawnOn] = useState(formatDate(new Date().toISOString(), zone));
  const [earlierData, setEarlierData] = useState('');
  const [safety, setSafety] = useState('');
  const [tried, setTried] = useState(false);

  const handleAct = async ({ reason }: { reason: string }) => {
    setTried(true);
    if (earlierData === '' || safety === '') throw new Error('Say what the participant chose, below.');
    await withdraw({
      reason,
      withdrawnOn,
      earlierData: earlierData as EarlierData,
      safetyFollowUp: safety === 'yes',
    });
    onDone();
  };

  return (
    <ActDialog
      title={`Withdrawal of ${participant.code}`}
      consequences={
        <p>
          Collection stops at once: no visit is begun and no entry opened any more. What is on record stays on
          record; cuts made before today do not change. A withdrawal is not taken back.
        </p>
      }
      act="Record the withdrawal"
      reasons={reasons}
      onAct={handleAct}
      onClose={onClose}
    >
      <TextField
        label="Withdrew on"
        required
        help="Year, month, day, at the site"
        value={withdrawnOn}
        onChange={(event) => setWithdrawnOn(event.target.value.trim())}
      />
      <RadioField
        name={names.data}
        label="Data taken before, in cuts made from now on"
        required
        choices={[
          { value: 'kept', label: 'kept', help: 'They go on to count in the analysis.' },
          { value: 'left-out', label: 'left out', help: 'They stay on record and are not analysed.' },
        ]}
        value={earlierData}
        onChange={setEarlierData}
        error={tried && earlierData === '' ? 'Choose what the participant decided.' : undefined}
      />
      <RadioField
        name={names.safety}
        label="Follow-up of adverse events"
        required
        choices={[
          { value: 'yes', label: 'allowed' },
          { value: 'no', label: 'not allowed' },
        ]}
        value={safety}
        onChange={setSafety}
        error={tried && safety === '' ? 'Choose what the participant decided.' : undefined}
      />
    </ActDialog>
  );
}
