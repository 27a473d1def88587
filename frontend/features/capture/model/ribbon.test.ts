import { describe, expect, it } from 'vitest';
import type { VisitDto } from '#schemas/api/capture.ts';
import { axisDays, ribbonOf } from './ribbon.ts';

const visit = (code: string, over: Partial<VisitDto>): VisitDto => ({
  id: `${code}-${over.plannedOn}`,
  participantId: `id-${code}`,
  participantCode: code,
  siteId: 's',
  visitTypeKey: 'v',
  label: 'Visit',
  state: 'planned',
  plannedOn: '2026-03-01',
  windowFrom: '2026-02-27',
  windowTo: '2026-03-03',
  startedAt: null,
  endedAt: null,
  missedReason: null,
  overdue: false,
  revision: 1,
  ...over,
});

describe('the visit ribbon', () => {
  it('counts days from each participant’s first planned visit, across a change of clocks', () => {
    const { rows, first, last } = ribbonOf([
      visit('BB-002-B', { plannedOn: '2026-05-10', windowFrom: '2026-05-08', windowTo: '2026-05-12' }),
      visit('AA-001-A', {}),
      visit('AA-001-A', { plannedOn: '2026-04-01', windowFrom: '2026-03-29', windowTo: '2026-04-05' }),
    ]);
    expect(rows.map(({ participantCode }) => participantCode)).toEqual(['AA-001-A', 'BB-002-B']);
    expect(rows[0]?.visits.map(({ on, windowFrom, windowTo }) => [windowFrom, on, windowTo])).toEqual([
      [-2, 0, 2],
      [28, 31, 35],
    ]);
    expect([first, last]).toEqual([-2, 35]);
  });

  it('tells early and late by the day a visit took place, not by the day it was planned for', () => {
    const timings = ['2026-02-26', '2026-02-27', '2026-03-03', '2026-03-04'].map(
      (day) => ribbonOf([visit('AA-001-A', { startedAt: `${day}T12:00:00Z` })]).rows[0]?.visits[0]?.timing,
    );
    expect(timings).toEqual(['early', 'inside', 'inside', 'late']);
  });

  it('keeps the axis readable: at most eleven round days', () => {
    expect(axisDays({ first: -14, last: 130 })).toEqual([0, 28, 56, 84, 112]);
    expect(axisDays({ first: -2, last: 35 })).toEqual([0, 7, 14, 21, 28, 35]);
    expect(axisDays({ first: 0, last: 4000 }).length).toBeLessThanOrEqual(11);
  });
});
