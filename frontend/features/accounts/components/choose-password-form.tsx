import { useState, type ReactNode, type SubmitEvent } from 'react';
import { Button } from '#frontend/components/button.tsx';
import { ErrorSummary } from '#frontend/components/error-summary.tsx';
import { CheckboxField, TextField } from '#frontend/components/fields.tsx';
import { ApiProblem } from '#frontend/lib/api.ts';

const minimumLength = 15;

interface ChoosePasswordFormProps {
  /** The account's address, so that a password manager keeps both together. */
  email?: string;
  /** A declaration without which nothing happens. */
  declaration?: string;
  /** Label of the act. */
  act: string;
  children?: ReactNode;
  onChoose: (password: string) => Promise<void>;
}

/** A password of one's own: any characters, paste and managers welcome (WS-01). */
export function ChoosePasswordForm({ email, declaration, act, children, onChoose }: ChoosePasswordFormProps) {
  const [missing, setMissing] = useState<{ password?: string; declaration?: string }>({});
  const [busy, setBusy] = useState(false);
  const [error, setError] = useState<unknown>();

  const handleSubmit = async (event: SubmitEvent<HTMLFormElement>) => {
    event.preventDefault();
    if (busy) return;
    const values = new FormData(event.currentTarget);
    const password = values.get('password');
    const written = typeof password === 'string' ? password : '';
    const found = {
      ...([...written].length < minimumLength
        ? { password: `Use at least ${minimumLength} characters.` }
        : {}),
      ...(declaration && values.get('declaration') === null
        ? { declaration: 'Without this no account can be opened.' }
        : {}),
    };
    setMissing(found);
    if (Object.keys(found).length > 0) return;
    setBusy(true);
    setError(undefined);
    try {
      await onChoose(written);
    } catch (problem) {
      setError(problem);
      setBusy(false);
    }
  };

  const refused =
    error instanceof ApiProblem
      ? error.errors.find(({ pointer }) => pointer === '/password')?.detail
      : undefined;
  return (
    <form onSubmit={(event) => void handleSubmit(event)} noValidate className="flex flex-col gap-4">
      {error !== undefined && <ErrorSummary error={error} />}
      {children}
      {email && <input type="email" autoComplete="username" readOnly hidden value={email} />}
      <TextField
        label="Choose a password"
        name="password"
        type="password"
        autoComplete="new-password"
        required
        help={`At least ${minimumLength} characters, any of them. A sentence of your own is good and easy to remember.`}
        error={missing.password ?? refused}
      />
      {declaration && (
        <CheckboxField name="declaration" required label={declaration} error={missing.declaration} />
      )}
      <Button type="submit" variant="primary" large busy={busy}>
        {act}
      </Button>
    </form>
  );
}
