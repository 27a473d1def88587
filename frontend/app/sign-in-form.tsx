import type { SubmitEvent } from 'react';
import { Button } from '../components/button.tsx';
import { ErrorSummary } from '../components/error-summary.tsx';
import { TextField } from '../components/fields.tsx';
import { useSignIn } from '../lib/session/sign-in.ts';

interface SignInFormProps {
  email?: string;
  password?: string;
  onSignedIn?: () => void;
}

/** E-mail and password; managers and paste work. */
export function SignInForm({ email, password, onSignedIn }: SignInFormProps) {
  const signIn = useSignIn();

  const handleSubmit = (event: SubmitEvent<HTMLFormElement>) => {
    event.preventDefault();
    if (signIn.isPending) return;
    const values = new FormData(event.currentTarget);
    signIn.mutate(
      { email: textOf(values, 'email').trim(), password: textOf(values, 'password') },
      onSignedIn ? { onSuccess: onSignedIn } : {},
    );
  };

  return (
    <form onSubmit={handleSubmit} noValidate className="flex flex-col gap-3.5">
      {signIn.error && <ErrorSummary error={signIn.error} />}
      <TextField
        label="E-mail"
        name="email"
        type="email"
        autoComplete="username"
        defaultValue={email}
        required
      />
      <TextField
        label="Password"
        name="password"
        type="password"
        autoComplete="current-password"
        defaultValue={password}
        required
      />
      <Button type="submit" variant="primary" large busy={signIn.isPending}>
        Sign in
      </Button>
    </form>
  );
}

function textOf(values: FormData, name: string): string {
  const value = values.get(name);
  return typeof value === 'string' ? value : '';
}
