import { Dialog } from '../components/dialog.tsx';
import type { Session } from '../lib/session/session.ts';
import { SignInForm } from './sign-in-form.tsx';

/** The session ended while a page was open: sign in over it, and go on where one was. */
export function SignInAgain({ session }: { session: Session }) {
  return (
    <Dialog title="You were signed out" onClose={() => undefined} binding>
      <p>
        The session of {session.person.name} has ended. Sign in again to go on; what you typed on this page is
        still here.
      </p>
      <SignInForm email={session.person.email} />
      <p className="text-sm">
        Someone else?{' '}
        <a href="/sign-in" className="link">
          Leave this page and sign in
        </a>
        .
      </p>
    </Dialog>
  );
}
