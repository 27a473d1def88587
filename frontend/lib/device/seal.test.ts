import { describe, expect, it } from 'vitest';
import { importDeviceKey, sealed, unsealed } from './seal.ts';

const keyOf = (byte: number) => importDeviceKey(Buffer.alloc(32, byte).toString('base64'));

// proves WS-13
describe('what waits on the device', () => {
  it('is read back with the same key', async () => {
    const key = await keyOf(1);
    const operation = { pointer: '/systolic/2', value: 118.5, written: '118.50' };
    expect(await unsealed(await sealed(operation, key), key)).toEqual(operation);
  });

  it('cannot be read with the key of another person, nor found in the bytes', async () => {
    const content = await sealed({ written: '118.50' }, await keyOf(1));
    await expect(unsealed(content, await keyOf(2))).rejects.toThrow();
    expect(Buffer.from(content.bytes).toString('latin1')).not.toContain('118.50');
  });

  it('looks different each time, so that equal values cannot be told', async () => {
    const key = await keyOf(1);
    const [one, other] = [await sealed('118.50', key), await sealed('118.50', key)];
    expect(Buffer.from(one.bytes).equals(Buffer.from(other.bytes))).toBe(false);
  });

  it('has a key that scripts can use and not read', async () => {
    await expect(crypto.subtle.exportKey('raw', await keyOf(1))).rejects.toThrow();
  });
});
