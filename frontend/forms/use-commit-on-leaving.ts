import { useEffect } from 'react';
import type { FormStore } from './form-store.ts';

/** What is typed becomes a value before the page goes away: another tab, a closed lid, another route. */
export function useCommitOnLeaving(store: FormStore): void {
  useEffect(() => {
    const handleHidden = () => {
      if (document.visibilityState === 'hidden') store.commitAll();
    };
    const handleLeaving = () => store.commitAll();
    document.addEventListener('visibilitychange', handleHidden);
    addEventListener('pagehide', handleLeaving);
    return () => {
      document.removeEventListener('visibilitychange', handleHidden);
      removeEventListener('pagehide', handleLeaving);
      store.commitAll();
    };
  }, [store]);
}
