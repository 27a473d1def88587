import { useQueryClient } from '@tanstack/react-query';
import { useEffect, useEffectEvent, useState } from 'react';
import { Button } from '../components/button.tsx';
import { Dialog } from '../components/dialog.tsx';
import { ErrorSummary } from '../components/error-summary.tsx';
import { api } from '../lib/api.ts';
import { useDeviceStore } from '../lib/device/use-device-store.ts';

/** Signs out. With changes still on the device it first says how many, and lets the person choose. */
export function SignOutDialog({ onStay }: { onStay: () => void }) {
  const store = useDeviceStore();
  const client = useQueryClient();
  const [waiting, setWaiting] = useState<number>();
  const [error, setError] = useState<unknown>();

  const signOut = async () => {
    try {
      await api('/session', { method: 'DELETE' });
      await store?.wipe();
      client.clear();
      // A fresh document: nothing of this person stays in memory.
      location.assign('/sign-in');
    } catch (problem) {
      setError(problem);
      setWaiting((count) => count ?? 0);
    }
  };

  const begin = useEffectEvent(async () => {
    const count = (await store?.count()) ?? 0;
    if (count === 0) await signOut();
    else setWaiting(count);
  });
  useEffect(() => void begin(), []);

  if (waiting === undefined) return null;
  return (
    <Dialog
      title={
        waiting === 0
          ? 'Not signed out yet'
          : `${waiting} ${waiting === 1 ? 'change waits' : 'changes wait'} on this device`
      }
      onClose={onStay}
      footer={
        <>
          <Button onClick={onStay}>Stay signed in</Button>
          <Button variant="danger" onClick={() => void signOut()}>
            {waiting === 0 ? 'Try again' : 'Sign out and lose them'}
          </Button>
        </>
      }
    >
      {error !== undefined && <ErrorSummary error={error} />}
      {waiting > 0 && (
        <p>
          They have not reached the server. Stay signed in until the network is back and they are sent, or
          sign out now: signing out wipes this device, and these changes are lost.
        </p>
      )}
    </Dialog>
  );
}
