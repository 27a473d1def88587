import { useState } from 'react';
import { Link, useLocation } from 'react-router-dom';
import { completePasswordReset } from '../features/accounts/api/invitations.ts';
import { ChoosePasswordForm } from '../features/accounts/components/choose-password-form.tsx';
import { BareLayout } from './bare-layout.tsx';

/** Where the link of a password reset leads. */
export function NewPasswordPage() {
  const token = useLocation().hash.slice(1);
  const [done, setDone] = useState(false);
  return (
    <BareLayout title="New password">
      <section className="flex flex-col gap-3 rounded border bg-paper px-5 py-4">
        <h1>{done ? 'The new password holds' : 'Choose a new password'}</h1>
        {done ? (
          <p>
            Every session of your account was ended.{' '}
            <Link to="/sign-in" className="link">
              Sign in
            </Link>{' '}
            with the new password.
          </p>
        ) : (
          <ChoosePasswordForm
            act="Set the new password"
            onChoose={async (password) => {
              await completePasswordReset(token, password);
              setDone(true);
            }}
          />
        )}
      </section>
    </BareLayout>
  );
}
