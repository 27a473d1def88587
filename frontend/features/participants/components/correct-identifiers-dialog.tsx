import { useState } from 'react';
import type { IdentifiersDto } from '#schemas/api/participants.ts';
import { ActDialog } from '#frontend/components/act-dialog.tsx';
import { say } from '#frontend/lib/notices.ts';
import { useParticipantActs } from '../api/participants.ts';
import { bodyOf, draftOf, draftProblems } from '../model/identifiers-form.ts';
import type { ParticipantDialogProps } from './confirm-criteria-dialog.tsx';
import { IdentifiersFields } from './identifiers-fields.tsx';

const reasons = ['Typing slip', 'Changed since', 'Confirmed with the participant'];

/** Corrects identifiers that are shown; the trail keeps that and why, never what they were. */
export function CorrectIdentifiersDialog({
  studyCode,
  participant,
  shown,
  onClose,
  onDone,
}: ParticipantDialogProps & { shown: IdentifiersDto }) {
  const { writeIdentifiers } = useParticipantActs(studyCode, participant);
  const [draft, setDraft] = useState(draftOf(shown));
  const [tried, setTried] = useState(false);
  const missing = draftProblems(draft);

  return (
    <ActDialog
      title={`Correct name and contact of ${participant.code}`}
      consequences={
        <p>The trail keeps that they were corrected, by whom and why. It does not keep what they were.</p>
      }
      act="Correct"
      reasons={reasons}
      onAct={async ({ reason }) => {
        setTried(true);
        const [problem] = Object.values(missing);
        if (problem !== undefined) throw new Error(problem);
        await writeIdentifiers(bodyOf(draft), reason, shown.revision);
        say(`${participant.code}: name and contact corrected`);
        onDone();
      }}
      onClose={onClose}
    >
      <IdentifiersFields
        draft={draft}
        onChange={setDraft}
        problemOf={(field) => (tried ? missing[field] : undefined)}
      />
    </ActDialog>
  );
}
