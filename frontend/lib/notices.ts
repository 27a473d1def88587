import { useSyncExternalStore } from 'react';

export interface Notice {
  id: number;
  text: string;
  /** `asks` stays until it is closed. */
  tone: 'told' | 'asks';
}

let notices: readonly Notice[] = [];
let next = 1;
const listeners = new Set<() => void>();
const shownFor = 6000;

/** Says something in the page's live region: "Saved 12:04:31, revision 3". */
export function say(text: string, tone: Notice['tone'] = 'told'): void {
  const notice = { id: next++, text, tone };
  change([...notices.slice(-2), notice]);
  if (tone === 'told') setTimeout(() => dismissNotice(notice.id), shownFor);
}

export function dismissNotice(id: number): void {
  change(notices.filter((notice) => notice.id !== id));
}

export const useNotices = () => useSyncExternalStore(subscribe, () => notices);

function subscribe(listener: () => void): () => void {
  listeners.add(listener);
  return () => listeners.delete(listener);
}

function change(to: readonly Notice[]) {
  notices = to;
  for (const listener of listeners) listener();
}
