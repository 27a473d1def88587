import { useSyncExternalStore } from 'react';
import { subscribe as subscribeToPreferences } from '../../lib/preferences.ts';

const dark = '(prefers-color-scheme: dark)';

/** Changes when the colours on the page change, by the device or by the person. */
export const useScheme = () =>
  useSyncExternalStore(
    subscribe,
    () => `${document.documentElement.dataset['scheme'] ?? ''} ${matchMedia(dark).matches}`,
  );

function subscribe(listener: () => void): () => void {
  const query = matchMedia(dark);
  query.addEventListener('change', listener);
  const leave = subscribeToPreferences(listener);
  return () => {
    query.removeEventListener('change', listener);
    leave();
  };
}
