import { useId, useState, type ReactNode, type SubmitEvent } from 'react';
import { ApiProblem } from '../lib/api.ts';
import { Button } from './button.tsx';
import { Dialog } from './dialog.tsx';
import { ErrorSummary } from './error-summary.tsx';
import { RadioField, TextareaField, TextField } from './fields.tsx';

export interface ActAnswers {
  reason: string;
  password?: string;
}

interface ActDialogProps {
  title: string;
  /** What will happen, in full: the person decides on this. */
  consequences: ReactNode;
  /** Label of the act itself, a verb with its object: "Publish version 3". */
  act: string;
  /** Usual reasons; own words can always be added. Leave out for own words only; `false` asks for none. */
  reasons?: readonly string[] | false;
  /** A signature: asks for the password again. */
  password?: boolean;
  /** Further fields of the act. */
  children?: ReactNode;
  /** Does it. What it throws is shown, and nothing typed is lost. */
  onAct: (answers: ActAnswers) => Promise<unknown>;
  onClose: () => void;
}

const ownWords = 'own words';

/** A binding act: shows what will happen, asks for the reason and, for a signature, for the password. */
export function ActDialog({
  title,
  consequences,
  act,
  reasons = [],
  password = false,
  children,
  onAct,
  onClose,
}: ActDialogProps) {
  const id = useId();
  const [busy, setBusy] = useState(false);
  const [error, setError] = useState<unknown>();
  const [chosen, setChosen] = useState('');
  const [words, setWords] = useState('');
  const [secret, setSecret] = useState('');
  const [tried, setTried] = useState(false);

  const asked = reasons !== false;
  const listed = asked && reasons.length > 0;
  const reason = reasonGiven(listed ? chosen : ownWords, words);
  const reasonMissing = asked && reason.length < 2;
  const passwordMissing = password && secret === '';

  const handleSubmit = async (event: SubmitEvent<HTMLFormElement>) => {
    event.preventDefault();
    setTried(true);
    if (busy || reasonMissing || passwordMissing) return;
    setBusy(true);
    setError(undefined);
    try {
      await onAct({ reason, ...(password ? { password: secret } : {}) });
      onClose();
    } catch (problem) {
      setError(problem);
    } finally {
      setBusy(false);
    }
  };

  return (
    <Dialog title={title} onClose={onClose} binding={busy}>
      <form onSubmit={(event) => void handleSubmit(event)} noValidate className="flex flex-col gap-4">
        <div className="flex flex-col gap-2">{consequences}</div>
        {error !== undefined && <ErrorSummary error={error} />}
        {children}
        {listed && (
          <RadioField
            name={id}
            label="Reason"
            required
            choices={[...reasons, ownWords].map((value) => ({
              value,
              label: value === ownWords ? 'In own words' : value,
            }))}
            value={chosen}
            onChange={setChosen}
            error={tried && chosen === '' ? 'Choose a reason, or give your own.' : undefined}
          />
        )}
        {asked && (!listed || chosen !== '') && (
          <TextareaField
            label={
              !listed
                ? 'Reason'
                : chosen === ownWords
                  ? 'Reason in own words'
                  : 'Add to the reason (optional)'
            }
            required={!listed || chosen === ownWords}
            value={words}
            onChange={(event) => setWords(event.target.value)}
            rows={2}
            error={tried && reasonMissing ? 'Give a reason that a reader will understand later.' : undefined}
          />
        )}
        {password && (
          <TextField
            label="Your password, to sign"
            type="password"
            autoComplete="current-password"
            required
            value={secret}
            onChange={(event) => setSecret(event.target.value)}
            error={passwordError(error, tried && passwordMissing)}
          />
        )}
        <div className="flex flex-wrap justify-end gap-3">
          <Button onClick={onClose} disabled={busy}>
            Leave it as it is
          </Button>
          <Button type="submit" variant="primary" busy={busy}>
            {act}
          </Button>
        </div>
      </form>
    </Dialog>
  );
}

function reasonGiven(chosen: string, words: string): string {
  const own = words.trim();
  if (chosen === ownWords) return own;
  return chosen !== '' && own !== '' ? `${chosen}: ${own}` : chosen;
}

function passwordError(error: unknown, missing: boolean): string | undefined {
  if (missing) return 'A signature needs your password again.';
  if (!(error instanceof ApiProblem)) return undefined;
  return error.errors.find(({ pointer }) => pointer === '/password')?.detail;
}
