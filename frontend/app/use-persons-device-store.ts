import { useEffect, useState } from 'react';
import { DeviceStore } from '../lib/device/device-store.ts';
import { importDeviceKey } from '../lib/device/seal.ts';
import type { Session } from '../lib/session/session.ts';

/** The unsent changes of this person; ready once the key is prepared. */
export function usePersonsDeviceStore({ person, deviceKey }: Session): DeviceStore | undefined {
  const [store, setStore] = useState<DeviceStore>();
  useEffect(() => {
    if (!deviceKey) return;
    let current = true;
    void importDeviceKey(deviceKey).then((key) => {
      if (current) setStore(new DeviceStore(person.id, key));
    });
    return () => {
      current = false;
    };
  }, [person.id, deviceKey]);
  return store;
}
