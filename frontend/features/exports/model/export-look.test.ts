import { describe, expect, it } from 'vitest';
import { exportLook, isExpired } from './export-look.ts';

const noon = Date.parse('2026-03-14T12:00:00Z');

describe('exportLook', () => {
  it('says that a file can be taken until its time is over, and not after', () => {
    const ready = { state: 'ready', expiresAt: '2026-03-14T12:00:01Z' } as const;
    expect(exportLook(ready, noon).word).toBe('ready to download, once');
    expect(exportLook(ready, noon + 1000).word).toMatch(/^no longer kept/);
  });

  it('leaves what was downloaded in time as it is', () =>
    expect(isExpired({ state: 'downloaded', expiresAt: '2026-03-01T00:00:00Z' }, noon)).toBe(false));
});
