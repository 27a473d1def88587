import { readPreference, subscribe } from './preferences.ts';

/** `system` follows the device; the others are a person's choice on it. */
export type SchemeChoice = 'system' | 'paper' | 'drum';

export const schemePreference = 'scheme';
export const defaultScheme: SchemeChoice = 'system';

/** Puts the chosen scheme on the document, now and whenever the choice changes. */
export function followScheme(root: HTMLElement): void {
  const apply = () => {
    const choice = readPreference<SchemeChoice>(schemePreference, defaultScheme);
    if (choice === 'system') delete root.dataset['scheme'];
    else root.dataset['scheme'] = choice;
  };
  apply();
  subscribe(apply);
}
