import { useSyncExternalStore } from 'react';

/** Settings of looks and keys for one person on one device. Never study data: these lines stay after sign-out. */
const prefix = 'vesselry:preference:';
const listeners = new Set<() => void>();
const cache = new Map<string, unknown>();

export function readPreference<T>(name: string, fallback: T): T {
  if (cache.has(name)) return cache.get(name) as T;
  const value = stored(name) ?? fallback;
  cache.set(name, value);
  return value as T;
}

export function writePreference(name: string, value: unknown): void {
  cache.set(name, value);
  try {
    localStorage.setItem(prefix + name, JSON.stringify(value));
  } catch {
    // A full or forbidden storage costs the setting at the next visit, never the act at hand.
  }
  for (const listener of listeners) listener();
}

/** A setting kept on this device, and its setter. `fallback` must be a constant of the module. */
export function usePreference<T>(name: string, fallback: T): [T, (value: T) => void] {
  const value = useSyncExternalStore(subscribe, () => readPreference(name, fallback));
  return [value, (next) => writePreference(name, next)];
}

export function subscribe(listener: () => void): () => void {
  listeners.add(listener);
  return () => listeners.delete(listener);
}

function stored(name: string): unknown {
  try {
    const text = localStorage.getItem(prefix + name);
    return text === null ? undefined : JSON.parse(text);
  } catch {
    return undefined;
  }
}

let version = 0;
subscribe(() => {
  version += 1;
});

/** Draws the component anew whenever any setting changes. */
export const usePreferences = () => useSyncExternalStore(subscribe, () => version);
