import { useEffect, useState } from 'react';
import { Button } from '../components/button.tsx';
import { Dialog } from '../components/dialog.tsx';
import { api, lastContact } from '../lib/api.ts';

const warnSeconds = 60;
const renewAfter = 5 * 60_000;
/** The server's limit (WS-04). */
const idleMinutes = 30;

/**
 * Warns a minute before the idle limit ends the session, with a button to stay (WCAG 2.2.1). Someone who works on
 * the page without sending anything renews the session by moving.
 */
export function IdleGuard() {
  const left = useSecondsLeft(idleMinutes * 60);
  useRenewal();
  if (left > warnSeconds) return null;
  return (
    <Dialog
      title={`Signed out in ${Math.max(0, left)} s`}
      onClose={() => void renew()}
      footer={
        <Button variant="primary" onClick={() => void renew()}>
          Stay signed in
        </Button>
      }
    >
      <p>
        Nothing was done for a while. What you typed stays on this page and, where it can, on this device.
      </p>
    </Dialog>
  );
}

function useSecondsLeft(limit: number): number {
  const [left, setLeft] = useState(limit);
  useEffect(() => {
    const timer = setInterval(() => setLeft(Math.ceil(limit - (Date.now() - lastContact()) / 1000)), 1000);
    return () => clearInterval(timer);
  }, [limit]);
  return left;
}

function useRenewal() {
  useEffect(() => {
    let asked = 0;
    const handleActivity = () => {
      const now = Date.now();
      if (now - lastContact() < renewAfter || now - asked < renewAfter) return;
      asked = now;
      void renew();
    };
    addEventListener('keydown', handleActivity);
    addEventListener('pointerdown', handleActivity);
    return () => {
      removeEventListener('keydown', handleActivity);
      removeEventListener('pointerdown', handleActivity);
    };
  }, []);
}

/** Any answered request renews the session; a failed one leaves the warning standing. */
const renew = () => api('/session').catch(() => undefined);
