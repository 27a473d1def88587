import { useState } from 'react';
import type { RefusalDto } from '#schemas/api/capture.ts';
import { Button } from '../../../components/button.tsx';
import { TextField } from '../../../components/fields.tsx';
import { ApiProblem } from '../../../lib/api.ts';

interface CompletionAnswersProps {
  /** What completing the entry was answered with. */
  error: Error | null;
  onAnswer: (confirmations: { checkId: string; reason: string }[]) => void;
}

/** What only asks can be answered with a reason; what refuses has to be mended in the form. */
export function CompletionAnswers({ error, onAnswer }: CompletionAnswersProps) {
  const [reason, setReason] = useState('');
  if (!(error instanceof ApiProblem) || error.slug !== 'fields-refused') return null;
  const waiting = (error.members['refused'] ?? []) as RefusalDto[];
  if (waiting.length === 0 || waiting.some(({ severity }) => severity === 'hard')) return null;
  return (
    <form
      className="flex flex-wrap items-end gap-3"
      onSubmit={(event) => {
        event.preventDefault();
        onAnswer(waiting.map(({ checkId }) => ({ checkId, reason })));
      }}
    >
      <TextField
        label="Complete it all the same, because"
        required
        className="min-w-72 flex-1"
        value={reason}
        onChange={(event) => setReason(event.target.value)}
      />
      <Button type="submit" disabled={reason.trim().length < 3}>
        Complete with this reason
      </Button>
    </form>
  );
}
