import { useState } from 'react';
import { ActDialog } from '#frontend/components/act-dialog.tsx';
import { SelectField, TextField } from '#frontend/components/fields.tsx';
import { formatDate } from '#frontend/lib/format/dates.ts';
import { useParticipantActs } from '../api/participants.ts';
import type { ParticipantDialogProps } from './confirm-criteria-dialog.tsx';
import { useSiteZone } from './use-site-zone.ts';

interface PlanVisitDialogProps extends ParticipantDialogProps {
  /** Visit types of the participant's protocol that are not planned yet, in its order. */
  visitTypes: readonly { key: string; label: string; windowBefore: number; windowAfter: number }[];
}

/** Plans one visit of the protocol on a day. */
export function PlanVisitDialog({
  studyCode,
  participant,
  visitTypes,
  onClose,
  onDone,
}: PlanVisitDialogProps) {
  const { planVisit } = useParticipantActs(studyCode, participant);
  const zone = useSiteZone(participant.siteId);
  const [visitTypeKey, setVisitTypeKey] = useState(visitTypes[0]?.key ?? '');
  const [plannedOn, setPlannedOn] = useState(formatDate(new Date().toISOString(), zone));
  const chosen = visitTypes.find(({ key }) => key === visitTypeKey);

  return (
    <ActDialog
      title={`Plan a visit of ${participant.code}`}
      consequences={
        <p>
          {chosen === undefined
            ? 'Choose the visit and its day.'
            : `The window opens ${chosen.windowBefore} days before the planned day and closes ${chosen.windowAfter} days after it.`}
        </p>
      }
      act="Plan the visit"
      reasons={false}
      onAct={async () => {
        await planVisit({ visitTypeKey, plannedOn });
        onDone();
      }}
      onClose={onClose}
    >
      <SelectField
        label="Visit"
        required
        choices={visitTypes.map(({ key, label }) => ({ value: key, label }))}
        value={visitTypeKey}
        onChange={(event) => setVisitTypeKey(event.target.value)}
      />
      <TextField
        label="Planned on"
        type="date"
        required
        value={plannedOn}
        onChange={(event) => setPlannedOn(event.target.value)}
      />
    </ActDialog>
  );
}
