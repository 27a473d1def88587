import { ActDialog } from '#frontend/components/act-dialog.tsx';
import { useParticipantActs } from '../api/participants.ts';
import type { ParticipantDialogProps } from './confirm-criteria-dialog.tsx';

/** Gives the next place of the sealed list; nobody at the site learns what it holds. */
export function AssignPlaceDialog({ studyCode, participant, onClose, onDone }: ParticipantDialogProps) {
  const { assignPlace } = useParticipantActs(studyCode, participant);
  return (
    <ActDialog
      title={`Assign a place to ${participant.code}`}
      consequences={
        <>
          <p>
            {participant.code} takes the next place of the sealed list at site {participant.siteCode}. This is
            for good: a place is never given back, and the criteria are not changed any more.
          </p>
          <p>
            Only the unblinded technician sees what is to be given. You will see that a place was assigned,
            and nothing else.
          </p>
        </>
      }
      act="Assign the place"
      reasons={false}
      onAct={async () => {
        await assignPlace();
        onDone();
      }}
      onClose={onClose}
    />
  );
}
