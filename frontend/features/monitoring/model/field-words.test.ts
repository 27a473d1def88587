import { describe, expect, it } from 'vitest';
import type { VerificationFieldDto } from '#schemas/api/monitoring.ts';
import { fieldLook, nextWaiting } from './field-words.ts';

const field = (state: VerificationFieldDto['state'], more: Partial<VerificationFieldDto> = {}) =>
  ({
    entryId: 'e',
    revision: 6,
    step: 'Pressures',
    address: '/systolic/0',
    label: 'Systolic, reading 1',
    value: { value: 118 },
    required: true,
    state,
    mark: null,
    openQueries: 0,
    ...more,
  }) satisfies VerificationFieldDto;

describe('nextWaiting', () => {
  const fields = [field('open'), field('verified'), field('fallen'), field('verified')];

  it('goes to the next field that waits, over verified ones', () => expect(nextWaiting(fields, 0)).toBe(2));

  it('starts again at the top', () => expect(nextWaiting(fields, 2)).toBe(0));

  it('says when nothing else waits', () =>
    expect(nextWaiting([field('verified'), field('open')], 1)).toBe(-1));
});

describe('fieldLook', () => {
  it('names the revision of a mark that fell', () => {
    const mark = { id: 'm', by: 'A', at: '2026-03-09T09:14:00Z', revision: 4, because: 'value-changed' };
    expect(fieldLook(field('fallen', { mark })).word).toBe('verified at revision 4, changed since');
    expect(fieldLook(field('fallen', { mark: { ...mark, because: 'cleared' } })).word).toMatch(/cleared$/);
  });

  it('asks for attention while a query is open', () =>
    expect(fieldLook(field('open', { openQueries: 1 }))).toEqual({ state: 'asks', word: 'asked' }));
});
