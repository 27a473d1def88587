import { createContext, useCallback, useContext, useSyncExternalStore } from 'react';
import type { FindingDto } from '#schemas/api/capture.ts';
import type { FieldState, FormStore } from './form-store.ts';

export interface FormEnvironment {
  store: FormStore;
  /** What every element id of this form begins with; the rest is the address. */
  idPrefix: string;
  readOnly: boolean;
  /** IANA zone in which times are entered. */
  zone: string | undefined;
  /** Keeps a value that a soft check asks about, with the person's reason. */
  onConfirm: ((finding: FindingDto, reason: string) => void) | undefined;
}

export const FormEnvironmentContext = createContext<FormEnvironment | undefined>(undefined);

export function useForm(): FormEnvironment {
  const environment = useContext(FormEnvironmentContext);
  if (!environment) throw new Error('A part of an instrument form is used outside of one');
  return environment;
}

/** The address of the field whose element has this id. */
export const useAddress = (id: string): string => id.slice(useForm().idPrefix.length);

/** What stands at an address; draws anew when exactly that changes. */
export function useFieldState(address: string): FieldState {
  const { store } = useForm();
  const subscribe = useCallback(
    (listener: () => void) => store.subscribe(address, listener),
    [store, address],
  );
  return useSyncExternalStore(subscribe, () => store.get(address));
}

export function useFindings(address: string): readonly FindingDto[] {
  const { store } = useForm();
  const subscribe = useCallback(
    (listener: () => void) => store.subscribe(address, listener),
    [store, address],
  );
  return useSyncExternalStore(subscribe, () => store.findingsAt(address));
}

/** Draws anew when any of these fields or their readings change. */
export function useFieldVersions(pointers: readonly string[]): void {
  const { store } = useForm();
  const names = pointers.join(' ');
  const subscribe = useCallback(
    (listener: () => void) => {
      const leave = names.split(' ').map((pointer) => store.subscribe(pointer, listener));
      return () => leave.forEach((stop) => stop());
    },
    [store, names],
  );
  useSyncExternalStore(subscribe, () =>
    names.split(' ').reduce((sum, pointer) => sum + store.versionOf(pointer), 0),
  );
}
