import { readPreference, writePreference } from '../preferences.ts';

/** One shortcut of the product. `keys` is a key, or two in sequence ("g n"). */
export interface Shortcut {
  id: string;
  keys: string;
  label: string;
  group: string;
}

interface Bound extends Shortcut {
  perform: () => void;
}

const enabledName = 'keys-enabled';
const remapName = 'keys-remapped';
const knownName = 'keys-known';
const noRemaps: Record<string, string> = {};
const noneKnown: readonly Shortcut[] = [];
const sequencePause = 1200;

let bound: readonly Bound[] = [];
const listeners = new Set<() => void>();

export const shortcutsEnabled = () => readPreference(enabledName, true);
export const setShortcutsEnabled = (on: boolean) => writePreference(enabledName, on);
export const remappedKeys = () => readPreference(remapName, noRemaps);

/** Puts a shortcut on other keys; `undefined` gives it its own back. */
export function remapShortcut(id: string, keys: string | undefined): void {
  const { [id]: _, ...others } = remappedKeys();
  writePreference(remapName, keys === undefined ? others : { ...others, [id]: keys });
}

/** The keys a shortcut answers to on this device. */
export const keysOf = ({ id, keys }: Pick<Shortcut, 'id' | 'keys'>) => remappedKeys()[id] ?? keys;

/** Every shortcut that was ever met on this device, so that the account page can put them on other keys. */
export const knownShortcuts = () => readPreference(knownName, noneKnown);

/** The shortcuts that work on the page at hand, for the list of keys. */
export const boundShortcuts = (): readonly Shortcut[] => bound;

export function subscribeToShortcuts(listener: () => void): () => void {
  listeners.add(listener);
  return () => listeners.delete(listener);
}

/** Makes a shortcut work until the returned function is called. The latest binding of a key wins. */
export function bindShortcut(shortcut: Bound): () => void {
  bound = [...bound, shortcut];
  remember(shortcut);
  for (const listener of listeners) listener();
  return () => {
    bound = bound.filter((other) => other !== shortcut);
    for (const listener of listeners) listener();
  };
}

/**
 * Listens for shortcuts on `target` until the returned function is called. Single keys never act while
 * something that takes text has the focus, inside an open dialog, or with a modifier held (WCAG 2.1.4).
 */
export function listenForShortcuts(target: Document): () => void {
  let first: { key: string; at: number } | undefined;

  const handleKey = (event: KeyboardEvent) => {
    if (event.defaultPrevented || event.ctrlKey || event.metaKey || event.altKey || event.isComposing) return;
    if (!shortcutsEnabled() || takesText(event) || target.querySelector('dialog[open]')) {
      first = undefined;
      return;
    }
    const now = event.timeStamp;
    const sequence = first && now - first.at < sequencePause ? `${first.key} ${event.key}` : undefined;
    const match = (sequence && find(sequence)) || find(event.key);
    if (match) {
      event.preventDefault();
      first = undefined;
      match.perform();
      return;
    }
    first = { key: event.key, at: now };
  };

  target.addEventListener('keydown', handleKey);
  return () => target.removeEventListener('keydown', handleKey);
}

function remember({ id, keys, label, group }: Shortcut): void {
  const known = knownShortcuts();
  if (known.some((other) => other.id === id && other.keys === keys && other.label === label)) return;
  writePreference(knownName, [...known.filter((other) => other.id !== id), { id, keys, label, group }]);
}

const find = (keys: string) => bound.findLast((shortcut) => keysOf(shortcut) === keys);

/** The element in a shadow root too, where the code editor lives. */
function takesText(event: KeyboardEvent): boolean {
  const [element] = event.composedPath();
  if (!(element instanceof HTMLElement)) return false;
  if (element.isContentEditable) return true;
  if (element instanceof HTMLInputElement)
    return !['checkbox', 'radio', 'button', 'submit'].includes(element.type);
  return element instanceof HTMLTextAreaElement || element instanceof HTMLSelectElement;
}
