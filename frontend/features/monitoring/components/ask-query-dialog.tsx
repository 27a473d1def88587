import type { VisitDto } from '#schemas/api/capture.ts';
import type { VerificationFieldDto } from '#schemas/api/monitoring.ts';
import { ActDialog } from '../../../components/act-dialog.tsx';
import { useState } from 'react';
import { TextareaField } from '../../../components/fields.tsx';
import { useRefusals } from '../../../lib/use-refusals.ts';
import { useAskQuery } from '../api/queries.ts';
import { FieldValue } from './field-value.tsx';

interface AskQueryDialogProps {
  study: string;
  visit: VisitDto;
  field: VerificationFieldDto;
  onClose: () => void;
}

/** Asks about one field of a visit. */
export function AskQueryDialog({ study, visit, field, onClose }: AskQueryDialogProps) {
  const ask = useAskQuery(study);
  const [text, setText] = useState('');
  const [refused, run] = useRefusals();
  return (
    <ActDialog
      title={`Ask about ${field.label}`}
      act="Ask"
      reasons={false}
      consequences={
        <p>
          {visit.participantCode}, {visit.label}, {field.step}: entered is{' '}
          <strong>
            <FieldValue value={field.value} />
          </strong>
          . The question goes to the one who made the entry, and stays open until you settle it.
        </p>
      }
      onAct={() =>
        run(() =>
          ask.mutateAsync({
            participantId: visit.participantId,
            visitId: visit.id,
            entryId: field.entryId,
            address: field.address,
            text: text.trim(),
          }),
        )
      }
      onClose={onClose}
    >
      <TextareaField
        label="Question"
        required
        value={text}
        onChange={(event) => setText(event.target.value)}
        error={refused['/text']}
        help="Say what the source reads and what was entered; name no person."
      />
    </ActDialog>
  );
}
