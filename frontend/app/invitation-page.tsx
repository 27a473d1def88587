import { useMutation } from '@tanstack/react-query';
import { useState, type SubmitEvent } from 'react';
import { Link, useParams } from 'react-router-dom';
import { Button } from '../components/button.tsx';
import { ErrorSummary } from '../components/error-summary.tsx';
import { CheckboxField, TextField } from '../components/fields.tsx';
import { api, ApiProblem } from '../lib/api.ts';
import { BareLayout } from './bare-layout.tsx';

const minimumLength = 15;

/** Takes up an invitation: a password of one's own, and the declaration that a signature here binds. */
export function InvitationPage() {
  const { token = '' } = useParams();
  const [missing, setMissing] = useState<{ password?: string; declaration?: string }>({});
  const accept = useMutation({
    mutationFn: (password: string) =>
      api<unknown>(`/invitations/${encodeURIComponent(token)}/acceptance`, {
        method: 'POST',
        body: { password, acceptDeclaration: true },
      }),
  });

  const handleSubmit = (event: SubmitEvent<HTMLFormElement>) => {
    event.preventDefault();
    if (accept.isPending) return;
    const values = new FormData(event.currentTarget);
    const password = values.get('password');
    const written = typeof password === 'string' ? password : '';
    const found = {
      ...([...written].length < minimumLength
        ? {
            password: `Use at least ${minimumLength} characters; a few words of your own are easy to remember.`,
          }
        : {}),
      ...(values.get('declaration') === null
        ? { declaration: 'Without this no account can be opened.' }
        : {}),
    };
    setMissing(found);
    if (Object.keys(found).length === 0) accept.mutate(written);
  };

  if (accept.isSuccess) {
    return (
      <BareLayout title="Account opened">
        <section className="flex flex-col gap-3 rounded border bg-paper px-5 py-4">
          <h1>Your account is open</h1>
          <p>
            <Link to="/sign-in" className="link">
              Sign in
            </Link>{' '}
            with your e-mail and the password you just chose.
          </p>
        </section>
      </BareLayout>
    );
  }

  const refused =
    accept.error instanceof ApiProblem
      ? accept.error.errors.find(({ pointer }) => pointer === '/password')?.detail
      : undefined;
  return (
    <BareLayout title="Accept the invitation">
      <section className="rounded border bg-paper px-5 py-4">
        <h1 className="mb-3">Accept the invitation</h1>
        <form onSubmit={handleSubmit} noValidate className="flex flex-col gap-4">
          {accept.error && <ErrorSummary error={accept.error} />}
          <TextField
            label="Choose a password"
            name="password"
            type="password"
            autoComplete="new-password"
            required
            help={`At least ${minimumLength} characters, any of them. Long is better than odd.`}
            error={missing.password ?? refused}
          />
          <CheckboxField
            name="declaration"
            required
            label="I understand that signing in Vesselry with my password is the legally binding equivalent of my handwritten signature, and that I lend my account to nobody."
            error={missing.declaration}
          />
          <Button type="submit" variant="primary" large busy={accept.isPending}>
            Open my account
          </Button>
        </form>
      </section>
    </BareLayout>
  );
}
