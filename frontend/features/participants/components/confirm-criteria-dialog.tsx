import { useState } from 'react';
import type { ParticipantDto } from '#schemas/api/participants.ts';
import { ActDialog } from '#frontend/components/act-dialog.tsx';
import { CheckboxField, TextField } from '#frontend/components/fields.tsx';
import { formatDate } from '#frontend/lib/format/dates.ts';
import { useParticipantActs } from '../api/participants.ts';
import { useSiteZone } from './use-site-zone.ts';

export interface ParticipantDialogProps {
  studyCode: string;
  participant: ParticipantDto;
  onClose: () => void;
  onDone: () => void;
}

/** Confirms that every criterion was checked and is met; from then on a place can be given. */
export function ConfirmCriteriaDialog({ studyCode, participant, onClose, onDone }: ParticipantDialogProps) {
  const { confirmEligibility } = useParticipantActs(studyCode, participant);
  const zone = useSiteZone(participant.siteId);
  const [checkedOn, setCheckedOn] = useState(formatDate(new Date().toISOString(), zone));
  const [met, setMet] = useState(false);
  const [tried, setTried] = useState(false);

  const handleAct = async () => {
    setTried(true);
    if (!met) throw new Error('Tick that every criterion is met, or leave it as it is.');
    await confirmEligibility({ criteriaMet: true, checkedOn });
    onDone();
  };

  return (
    <ActDialog
      title={`Criteria for ${participant.code}`}
      consequences={
        <p>Once confirmed, this participant can be given a place. After that it is not changed any more.</p>
      }
      act="Confirm the criteria"
      reasons={false}
      onAct={handleAct}
      onClose={onClose}
    >
      <TextField
        label="Checked on"
        required
        help="Year, month, day, at the site"
        value={checkedOn}
        onChange={(event) => setCheckedOn(event.target.value.trim())}
      />
      <CheckboxField
        label="Every criterion of the protocol was checked against its source and is met"
        checked={met}
        onChange={(event) => setMet(event.target.checked)}
        error={tried && !met ? 'This is what you confirm.' : undefined}
      />
    </ActDialog>
  );
}
