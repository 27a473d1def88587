import { Button } from '../components/button.tsx';
import { Dialog } from '../components/dialog.tsx';
import { ErrorSummary } from '../components/error-summary.tsx';
import type { useSignOut } from './use-sign-out.ts';

/** Shown when signing out would lose changes, or failed: the person chooses. */
export function SignOutDialog({ held, leave, stay }: ReturnType<typeof useSignOut>) {
  if (held === undefined) return null;
  const failed = 'error' in held;
  const title = failed
    ? 'Not signed out yet'
    : `${held.waiting} ${held.waiting === 1 ? 'change waits' : 'changes wait'} on this device`;
  return (
    <Dialog
      title={title}
      onClose={stay}
      footer={
        <>
          <Button onClick={stay}>Stay signed in</Button>
          <Button variant="danger" onClick={leave}>
            {failed ? 'Try again' : 'Sign out and lose them'}
          </Button>
        </>
      }
    >
      {failed ? (
        <ErrorSummary error={held.error} />
      ) : (
        <p>
          They have not reached the server. Stay signed in until the network is back and they are sent, or
          sign out now: signing out wipes this device, and these changes are lost.
        </p>
      )}
    </Dialog>
  );
}
