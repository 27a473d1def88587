import { describe, expect, it } from 'vitest';
import { screepath } from './demo/screepath.ts';
import { protocolDifference } from './protocol-difference.ts';
import type { Protocol, VisitType } from './protocol.ts';

const sentences = (after: Protocol) => protocolDifference(screepath, after).map(({ sentence }) => sentence);
const withVisit = (key: string, change: (visit: VisitType) => VisitType): Protocol => ({
  ...screepath,
  visitTypes: screepath.visitTypes.map((visit) => (visit.key === key ? change(visit) : visit)),
});

// proves IV-01
describe('the difference of two protocols', () => {
  it('is nothing for the same content, whatever the order of its members', () => {
    const turned = Object.fromEntries(Object.entries(screepath).reverse()) as unknown as Protocol;
    expect(protocolDifference(screepath, turned)).toEqual([]);
  });

  it('names visit, step and what changed', () => {
    const after = withVisit('period-1', (visit) => ({
      ...visit,
      runSheet: visit.runSheet.map((step) => (step.key === 'rest' ? { ...step, plannedMinute: 35 } : step)),
    }));
    expect(protocolDifference(screepath, after)).toEqual([
      {
        path: ['visitTypes', 'period-1', 'runSheet', 'rest', 'plannedMinute'],
        kind: 'changed',
        before: 30,
        after: 35,
        visitType: 'period-1',
        sentence: 'Period 1, Rest, supine: planned minute changed from 30 to 35',
      },
    ]);
  });

  it('tells added, removed and moved steps', () => {
    const [first, second, ...others] = screepath.visitTypes[3]?.runSheet ?? [];
    if (!first || !second) throw new Error('the follow-up has no steps');
    const lunch = { ...first, key: 'lunch', label: 'Lunch' };
    expect(
      sentences(
        withVisit('follow-up', (visit) => ({ ...visit, runSheet: [first, second, ...others, lunch] })),
      ),
    ).toEqual(['Follow-up, Lunch: added']);
    expect(
      sentences(withVisit('follow-up', (visit) => ({ ...visit, runSheet: [second, ...others] }))),
    ).toEqual(['Follow-up, Pre-visit checks: removed']);
    expect(
      sentences(withVisit('follow-up', (visit) => ({ ...visit, runSheet: [second, first, ...others] }))),
    ).toEqual([expect.stringContaining('Follow-up: run sheet put in another order') as string]);
  });

  it('tells changes of the study as a whole', () => {
    expect(
      sentences({ ...screepath, washoutDays: 70, allocation: { blockSizes: [4], stratifyBySite: false } }),
    ).toEqual([
      'Washout in days changed from 84 to 70',
      'Allocation, block sizes changed from 2, 4 to 4',
      'Allocation, stratified by site changed from yes to no',
    ]);
  });
});
