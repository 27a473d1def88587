import { createContext, useContext } from 'react';
import type { DeviceStore } from './device-store.ts';

/** The store of the person signed in; `undefined` while its key is prepared. */
export const DeviceStoreContext = createContext<DeviceStore | undefined>(undefined);

export const useDeviceStore = () => useContext(DeviceStoreContext);
