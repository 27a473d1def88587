import { describe, expect, it } from 'vitest';
import { laidOver } from './laid-over.ts';

describe('laidOver', () => {
  it('shows what is typed over what is stored, and leaves the stored values alone', () => {
    const stored = {
      '/arm': { value: 'left' },
      '/systolic/0': { value: 118 },
      '/systolic/1!rejected': { value: 'movement' },
    };
    const shown = laidOver(stored, [
      { pointer: '/systolic/0', value: 121.5, written: '121.50' },
      { pointer: '/systolic/1', rejected: null },
      { pointer: '/systolic/2', rejected: 'cuff-artefact' },
      { pointer: '/arm', value: null },
      { pointer: '/height', missing: 'not-done' },
    ]);
    expect(shown).toEqual({
      '/systolic/0': { value: 121.5, written: '121.50' },
      '/systolic/2!rejected': { value: 'cuff-artefact' },
      '/height': { missing: 'not-done' },
    });
    expect(stored['/systolic/0']).toEqual({ value: 118 });
  });
});
