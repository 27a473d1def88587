import { useQueryClient } from '@tanstack/react-query';
import { useState } from 'react';
import { api } from '../lib/api.ts';
import { useDeviceStore } from '../lib/device/use-device-store.ts';

/** Why the person is still signed in after asking to leave. */
type Held = { waiting: number } | { error: unknown } | undefined;

/** Signing out, which first looks whether changes wait on the device. */
export function useSignOut() {
  const store = useDeviceStore();
  const client = useQueryClient();
  const [held, setHeld] = useState<Held>();

  const leave = async () => {
    try {
      await api('/session', { method: 'DELETE' });
      await store?.wipe();
      client.clear();
      // A fresh document: nothing of this person stays in memory.
      location.assign('/sign-in');
    } catch (error) {
      setHeld({ error });
    }
  };

  const ask = async () => {
    const waiting = (await store?.count()) ?? 0;
    if (waiting === 0) await leave();
    else setHeld({ waiting });
  };

  return { held, ask: () => void ask(), leave: () => void leave(), stay: () => setHeld(undefined) };
}
