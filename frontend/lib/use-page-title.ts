import { useEffect } from 'react';

/** Names the page in the browser's tab and history. Codes only, never a participant's name. */
export function usePageTitle(title: string): void {
  useEffect(() => {
    document.title = `${title} · Vesselry`;
  }, [title]);
}
