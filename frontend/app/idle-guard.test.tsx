import { act, cleanup, fireEvent, render, screen } from '@testing-library/react';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { api } from '../lib/api.ts';
import { IdleGuard } from './idle-guard.tsx';

const minute = 60_000;
const fetching = vi.fn(() =>
  Promise.resolve(new Response('{}', { headers: { 'Content-Type': 'application/json' } })),
);

beforeEach(async () => {
  vi.useFakeTimers();
  vi.stubGlobal('fetch', fetching);
  await api('/session');
  fetching.mockClear();
});
afterEach(() => {
  cleanup();
  vi.useRealTimers();
  vi.unstubAllGlobals();
});

const pass = (milliseconds: number) => act(() => vi.advanceTimersByTimeAsync(milliseconds));

// proves AX-06
describe('IdleGuard', () => {
  it('warns a minute before the session ends, and lets one stay', async () => {
    render(<IdleGuard />);
    await pass(28.9 * minute);
    expect(screen.queryByRole('dialog')).toBeNull();
    await pass(0.2 * minute);
    expect(screen.getByRole('dialog').textContent).toMatch(/Signed out in 5\d s/);
    fireEvent.click(screen.getByRole('button', { name: 'Stay signed in' }));
    await pass(2000);
    expect(fetching).toHaveBeenCalledTimes(1);
    expect(screen.queryByRole('dialog')).toBeNull();
  });

  it('renews the session of someone who works without sending anything', async () => {
    render(<IdleGuard />);
    await pass(6 * minute);
    fireEvent.keyDown(document.body, { key: 'a' });
    fireEvent.keyDown(document.body, { key: 'b' });
    await pass(0);
    expect(fetching).toHaveBeenCalledTimes(1);
  });
});
