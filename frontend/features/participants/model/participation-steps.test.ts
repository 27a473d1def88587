import { describe, expect, it } from 'vitest';
import { participationSteps } from './participation-steps.ts';

const screening = {
  state: 'screening',
  consentedOn: null,
  consentVersion: null,
  eligibleOn: null,
  allocation: null,
  visits: { completed: 0, missed: 0, planned: 0 },
} as const;
const consented = {
  ...screening,
  state: 'consented',
  consentedOn: '2026-03-14',
  consentVersion: '1.2',
} as const;
const eligible = { ...consented, eligibleOn: '2026-03-15' } as const;
const assignedAt = '2026-03-15T09:00:00.000Z';
const allocated = { ...eligible, state: 'allocated', allocation: { assignedAt, hidden: true } } as const;

const opened = (...args: Parameters<typeof participationSteps>) =>
  participationSteps(...args)
    .filter(({ open }) => open)
    .map(({ key }) => key);

describe('the steps of taking part', () => {
  // proves AC-06
  it('open one after the other', () => {
    expect(opened(screening, true)).toEqual([]);
    expect(opened(consented, true)).toEqual(['criteria']);
    expect(opened(eligible, true)).toEqual(['place']);
    expect(opened(allocated, true)).toEqual([]);
  });

  it('say why a closed one is closed', () => {
    const details = participationSteps(screening, true).map(({ detail }) => detail);
    expect(details).toEqual([
      'Recorded when the consent form of the first visit is completed.',
      'Checked after the consent.',
      'Given after consent and criteria.',
      'None is planned yet.',
    ]);
  });

  it('have no place to give where everybody gets the same', () => {
    expect(participationSteps(eligible, false).map(({ key }) => key)).toEqual([
      'consent',
      'criteria',
      'visits',
    ]);
    expect(opened(eligible, false)).toEqual([]);
  });

  // proves RB-07
  it('show a place in the same step whether its condition may be known or not', () => {
    const [, , hidden] = participationSteps(allocated, true);
    expect(hidden).toMatchObject({
      key: 'place',
      mark: 'hidden',
      detail: 'assigned · hidden until unblinding',
    });
    const known = {
      assignedAt,
      hidden: false as const,
      sequence: { key: 'ab', label: 'Alder first' },
      periods: [
        { period: 1, condition: { key: 'a', label: 'Alder' } },
        { period: 2, condition: { key: 'b', label: 'Birch' } },
      ],
    };
    const [, , shown] = participationSteps({ ...allocated, allocation: known }, true);
    expect(shown).toMatchObject({ key: 'place', detail: 'Alder first: Alder, then Birch' });
  });

  it('count visits', () => {
    const visits = { completed: 2, missed: 1, planned: 4 };
    expect(participationSteps({ ...allocated, visits }, true).at(-1)).toMatchObject({
      word: 'under way',
      detail: '2 of 4 completed, 1 missed',
    });
    expect(
      participationSteps({ ...allocated, visits: { completed: 3, missed: 1, planned: 4 } }, true).at(-1),
    ).toMatchObject({ word: 'done' });
  });

  // proves CP-03
  it('stop with a withdrawal; what is on record stays', () => {
    const steps = participationSteps({ ...eligible, state: 'withdrawn' }, true);
    expect(steps.map(({ word }) => word)).toEqual(['on record', 'met', 'stopped', 'stopped']);
    expect(steps.some(({ open }) => open)).toBe(false);
  });
});
