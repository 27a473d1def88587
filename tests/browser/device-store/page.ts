import { DeviceStore } from '#frontend/lib/device/device-store.ts';
import { importDeviceKey } from '#frontend/lib/device/seal.ts';

/** Opens the store of a person, whose key is made of one repeated byte. */
const open = async (personId: string, keyByte: number) => {
  const key = await importDeviceKey(btoa(String.fromCharCode(keyByte).repeat(32)));
  return new DeviceStore(personId, key);
};

declare global {
  interface Window {
    openStore: typeof open;
  }
}
window.openStore = open;
