import { describe, expect, it } from 'vitest';
import { unblindingSteps } from './unblinding-steps.ts';

const request = { by: 'Bela', byMe: false, at: '2026-05-01T10:00:00Z', reason: 'plan signed', revision: 1 };
const acts = (...[unblinding]: [Parameters<typeof unblindingSteps>[0]]) =>
  unblindingSteps(unblinding, (instant) => instant.slice(0, 10)).map(({ act }) => act);

// proves RB-08 on the client's side
describe('the steps of an unblinding', () => {
  it('open after the lock, for one and then for another', () => {
    expect(acts({ studyState: 'running', request: null, confirmed: null })).toEqual([null, null, null]);
    expect(acts({ studyState: 'locked', request: null, confirmed: null })).toEqual([null, 'ask', null]);
    expect(acts({ studyState: 'locked', request, confirmed: null })).toEqual([null, null, 'confirm']);
    expect(acts({ studyState: 'locked', request: { ...request, byMe: true }, confirmed: null })).toEqual([
      null,
      null,
      null,
    ]);
    expect(acts({ studyState: 'running', request, confirmed: null })).toEqual([null, null, null]);
    const confirmed = { by: 'Petra', at: '2026-05-02T10:00:00Z' };
    expect(acts({ studyState: 'unblinded', request, confirmed })).toEqual([null, null, null]);
  });

  it('name both hands, with time and reason', () => {
    const confirmed = { by: 'Petra', at: '2026-05-02T10:00:00Z' };
    const [, first, last] = unblindingSteps({ studyState: 'unblinded', request, confirmed }, (instant) =>
      instant.slice(0, 10),
    );
    expect(first).toMatchObject({ title: 'Bela asked', detail: '2026-05-01: plan signed' });
    expect(last).toMatchObject({ title: 'Petra confirmed', detail: '2026-05-02' });
  });
});
