import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { Link, useLocation } from 'react-router-dom';
import { Loaded } from '../components/states.tsx';
import { acceptInvitation, invitedPersonQuery } from '../features/accounts/api/invitations.ts';
import { ChoosePasswordForm } from '../features/accounts/components/choose-password-form.tsx';
import { BareLayout } from './bare-layout.tsx';

const declaration =
  'I understand that signing in Vesselry with my password is the legally binding equivalent of my handwritten signature, and that I lend my account to nobody.';

/** Takes up an invitation: a password of one's own, and the declaration that a signature here binds. */
export function InvitationPage() {
  const token = useLocation().hash.slice(1);
  const query = useQuery(invitedPersonQuery(token));
  const [accepted, setAccepted] = useState(false);
  if (accepted) {
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
  return (
    <BareLayout title="Accept the invitation">
      <section className="rounded border bg-paper px-5 py-4">
        <h1 className="mb-3">Accept the invitation</h1>
        <Loaded query={query}>
          {({ name, email }) => (
            <ChoosePasswordForm
              email={email}
              declaration={declaration}
              act="Open my account"
              onChoose={async (password) => {
                await acceptInvitation(token, password);
                setAccepted(true);
              }}
            >
              <p>
                For <strong>{name}</strong>, who signs in as <span className="break-all">{email}</span>. If
                this is not you, leave this page.
              </p>
            </ChoosePasswordForm>
          )}
        </Loaded>
      </section>
    </BareLayout>
  );
}
