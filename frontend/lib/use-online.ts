import { useSyncExternalStore } from 'react';

/** Whether this device has a network at all. */
export const useOnline = () => useSyncExternalStore(subscribe, () => navigator.onLine);

function subscribe(listener: () => void): () => void {
  addEventListener('online', listener);
  addEventListener('offline', listener);
  return () => {
    removeEventListener('online', listener);
    removeEventListener('offline', listener);
  };
}
