import { useState, type SubmitEvent } from 'react';
import type { FindingDto } from '#schemas/api/capture.ts';
import { Button } from '../components/button.tsx';
import { FieldError } from '../components/field.tsx';
import { TextField } from '../components/fields.tsx';
import { useFindings, useForm } from './form-context.ts';

/** What the checks say at an address: a hard one names the fault, a soft one asks whether to keep the value. */
export function FindingList({ address }: { address: string }) {
  const findings = useFindings(address);
  return findings.map((finding) =>
    finding.severity === 'hard' ? (
      <FieldError key={finding.checkId + finding.message}>{finding.message}</FieldError>
    ) : (
      <SoftFinding key={finding.checkId + finding.message} finding={finding} />
    ),
  );
}

function SoftFinding({ finding }: { finding: FindingDto }) {
  const { onConfirm, readOnly } = useForm();
  const [asking, setAsking] = useState(false);
  const [error, setError] = useState<string>();

  const handleSubmit = (event: SubmitEvent<HTMLFormElement>) => {
    event.preventDefault();
    // The form around this one must not hear of it.
    event.stopPropagation();
    const value = new FormData(event.currentTarget).get('reason');
    const reason = typeof value === 'string' ? value.trim() : '';
    if (reason.length < 3) {
      setError('Say why the value is right, so that a reader understands it later.');
      return;
    }
    setAsking(false);
    onConfirm?.(finding, reason);
  };

  if (finding.confirmed !== undefined) {
    return (
      <p className="text-sm text-ink-soft">
        {finding.message} Kept: {finding.confirmed}
      </p>
    );
  }
  return (
    <div className="flex flex-col gap-2 rounded-r border-l-3 border-straw bg-straw-wash px-3 py-1.5 text-sm text-straw-ink">
      <p>
        {finding.message}{' '}
        {onConfirm && !readOnly && !asking && (
          <button type="button" className="min-h-6 link" onClick={() => setAsking(true)}>
            Keep it with a reason
          </button>
        )}
      </p>
      {asking && (
        <form onSubmit={handleSubmit} noValidate className="flex flex-wrap items-end gap-2">
          <TextField
            label="Why it is kept"
            name="reason"
            required
            error={error}
            className="min-w-56 flex-1"
          />
          <Button type="submit">Keep</Button>
          <Button variant="quiet" onClick={() => setAsking(false)}>
            Leave
          </Button>
        </form>
      )}
    </div>
  );
}
