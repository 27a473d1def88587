import { randomBytes } from 'node:crypto';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { blindIndex, keyedDigest, seal, sealWithKeyId, unseal, unsealWithKeyId } from './sealing.ts';

const old = { currentKeyId: 'k1', keys: { k1: randomBytes(32) }, indexKey: randomBytes(32) };
const rotated = { ...old, currentKeyId: 'k2', keys: { k2: randomBytes(32), ...old.keys } };
const place = { table: 'direct_identifiers', row: 'c0ffee', column: 'name' };

describe('sealing', () => {
  it('gives back what was sealed, whatever the text', () => {
    fc.assert(
      fc.property(
        fc.string({ unit: 'grapheme' }),
        (text) => unseal(old, 'k1', place, seal(old, place, text)) === text,
      ),
    );
  });

  // proves CP-05
  it('shows nothing of the text, and never the same bytes twice', () => {
    const sealed = seal(old, place, 'Canary Wharfinger');
    expect(sealed.toString('latin1')).not.toContain('Canary');
    expect(seal(old, place, 'Canary Wharfinger').equals(sealed)).toBe(false);
  });

  it('does not open in another row, column or table, nor under another key', () => {
    const sealed = seal(rotated, place, 'Canary');
    for (const moved of [{ row: 'decaf' }, { column: 'phone' }, { table: 'other' }]) {
      expect(() => unseal(rotated, 'k2', { ...place, ...moved }, sealed)).toThrow('does not open');
    }
    expect(() => unseal(rotated, 'k1', place, sealed)).toThrow('does not open');
  });

  it('does not open when one bit was changed, and does not say what it held', () => {
    const sealed = seal(old, place, 'Canary');
    for (let at = 0; at < sealed.length; at += 1) {
      const changed = Buffer.from(sealed);
      changed[at]! ^= 1;
      expect(() => unseal(old, 'k1', place, changed)).toThrow(/^(?!.*Canary)/);
    }
    expect(() => unseal(old, 'k1', place, sealed.subarray(0, 20))).toThrow('does not open');
  });

  it('reads old rows by their key after a new key came into use', () => {
    const before = seal(old, place, 'Canary');
    const after = seal(rotated, place, 'Canary');
    expect(unseal(rotated, 'k1', place, before)).toBe('Canary');
    expect(unseal(rotated, 'k2', place, after)).toBe('Canary');
    expect(() => unseal(old, 'k2', place, after)).toThrow('IDENTITY_KEY does not hold the key "k2"');
    expect(unsealWithKeyId(rotated, place, sealWithKeyId(old, place, 'making'))).toBe('making');
    expect(unsealWithKeyId(rotated, place, sealWithKeyId(rotated, place, 'making'))).toBe('making');
  });
});

describe('the blind index', () => {
  const person = { studyId: 's1', name: 'Zoë O’Hara-Lind', birthDate: '1980-02-29' };
  const same = (other: Partial<typeof person>) =>
    blindIndex(old, { ...person, ...other }).equals(blindIndex(old, person));

  it.each(['zoe ohara lind', "LIND, Zoe O'Hara", ' Zoë  O’Hara Lind '])('knows %s again', (name) => {
    expect(same({ name })).toBe(true);
  });

  it('tells people, birth dates and studies apart', () => {
    expect(same({ name: 'Zoe Lind' })).toBe(false);
    expect(same({ birthDate: '1980-02-28' })).toBe(false);
    expect(same({ studyId: 's2' })).toBe(false);
  });

  it('cannot be computed without the key', () => {
    const other = { ...old, indexKey: randomBytes(32) };
    expect(blindIndex(other, person).equals(blindIndex(old, person))).toBe(false);
    expect(keyedDigest(other, 'body')).not.toBe(keyedDigest(old, 'body'));
  });
});
