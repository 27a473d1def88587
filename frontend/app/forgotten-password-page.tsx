import { useState, type SubmitEvent } from 'react';
import { Link } from 'react-router-dom';
import { Button } from '../components/button.tsx';
import { ErrorSummary } from '../components/error-summary.tsx';
import { TextField } from '../components/fields.tsx';
import { askForPasswordReset } from '../features/accounts/api/invitations.ts';
import { BareLayout } from './bare-layout.tsx';

/** Asks for a link to a new password; the answer is the same whether there is such an account or not (EM-04). */
export function ForgottenPasswordPage() {
  const [busy, setBusy] = useState(false);
  const [asked, setAsked] = useState(false);
  const [error, setError] = useState<unknown>();

  const handleSubmit = async (event: SubmitEvent<HTMLFormElement>) => {
    event.preventDefault();
    if (busy) return;
    const email = new FormData(event.currentTarget).get('email');
    setBusy(true);
    setError(undefined);
    try {
      await askForPasswordReset(typeof email === 'string' ? email.trim() : '');
      setAsked(true);
    } catch (problem) {
      setError(problem);
    } finally {
      setBusy(false);
    }
  };

  return (
    <BareLayout title="Forgotten password">
      <section className="flex flex-col gap-3 rounded border bg-paper px-5 py-4">
        <h1>Forgotten your password?</h1>
        {asked ? (
          <p role="status">
            If an account has this address, a link is on its way to it. It works once, within an hour.
          </p>
        ) : (
          <form onSubmit={(event) => void handleSubmit(event)} noValidate className="flex flex-col gap-4">
            {error !== undefined && <ErrorSummary error={error} />}
            <TextField
              label="E-mail of your account"
              name="email"
              type="email"
              autoComplete="username"
              required
              help="A link to choose a new password goes there. Your present password holds until then."
            />
            <Button type="submit" variant="primary" large busy={busy}>
              Send the link
            </Button>
          </form>
        )}
        <Link to="/sign-in" className="link">
          Back to sign-in
        </Link>
      </section>
    </BareLayout>
  );
}
