import { useEffect, useEffectEvent, useSyncExternalStore } from 'react';
import { bindShortcut, boundShortcuts, subscribeToShortcuts, type Shortcut } from './key-map.ts';

/**
 * Makes a key work while the component is on the page.
 *
 * @example useShortcut({ id: 'verify', keys: 'v', label: 'Verify the value', group: 'Verification desk' }, verify)
 */
export function useShortcut(shortcut: Shortcut, perform: () => void, { active = true } = {}): void {
  const { id, keys, label, group } = shortcut;
  const act = useEffectEvent(perform);
  useEffect(() => {
    if (!active) return;
    return bindShortcut({ id, keys, label, group, perform: () => act() });
  }, [id, keys, label, group, active]);
}

export const useBoundShortcuts = () => useSyncExternalStore(subscribeToShortcuts, boundShortcuts);
