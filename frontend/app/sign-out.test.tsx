import { QueryClientProvider } from '@tanstack/react-query';
import { cleanup, fireEvent, render, screen, waitFor } from '@testing-library/react';
import { MemoryRouter } from 'react-router-dom';
import { afterEach, describe, expect, it, vi } from 'vitest';
import type { DeviceStore } from '../lib/device/device-store.ts';
import { DeviceStoreContext } from '../lib/device/use-device-store.ts';
import { createQueryClient } from '../lib/query-client.ts';
import { SessionContext } from '../lib/session/session.ts';
import { AccountMenu } from './account-menu.tsx';

const session = {
  person: { id: 'p', name: 'Ivo Varro', email: 'ivo@example.test' },
  memberships: [],
  acting: null,
  rules: [],
  deviceKey: '',
};

function show(waiting: number, status = 204) {
  const store = { count: vi.fn(() => Promise.resolve(waiting)), wipe: vi.fn(() => Promise.resolve()) };
  const fetching = vi.fn(() => Promise.resolve(new Response(null, { status })));
  const assign = vi.fn();
  vi.stubGlobal('fetch', fetching);
  vi.stubGlobal('location', { assign });
  render(
    <QueryClientProvider client={createQueryClient()}>
      <MemoryRouter>
        <SessionContext value={session}>
          <DeviceStoreContext value={store as unknown as DeviceStore}>
            <AccountMenu />
          </DeviceStoreContext>
        </SessionContext>
      </MemoryRouter>
    </QueryClientProvider>,
  );
  fireEvent.click(screen.getByRole('button', { name: /Account of Ivo Varro/ }));
  fireEvent.click(screen.getByRole('button', { name: 'Sign out' }));
  return { store, fetching, assign };
}

afterEach(() => {
  cleanup();
  vi.unstubAllGlobals();
});

// proves WS-13
describe('signing out', () => {
  it('ends the session, wipes the device and leaves the document', async () => {
    const { store, assign } = show(0);
    await waitFor(() => expect(assign).toHaveBeenCalledWith('/sign-in'));
    expect(store.wipe).toHaveBeenCalled();
  });

  it('first says how many changes wait, and stays if the person stays', async () => {
    const { store, fetching } = show(4);
    expect(await screen.findByRole('dialog', { name: '4 changes wait on this device' })).toBeTruthy();
    expect(fetching).not.toHaveBeenCalled();
    fireEvent.click(screen.getByRole('button', { name: 'Stay signed in' }));
    expect(screen.queryByRole('dialog')).toBeNull();
    expect(store.wipe).not.toHaveBeenCalled();
  });

  it('loses them only when told to', async () => {
    const { store, assign } = show(1);
    fireEvent.click(await screen.findByRole('button', { name: 'Sign out and lose them' }));
    await waitFor(() => expect(assign).toHaveBeenCalled());
    expect(store.wipe).toHaveBeenCalled();
  });

  it('keeps them when the server could not be told', async () => {
    const { store, assign } = show(0, 503);
    expect(await screen.findByRole('dialog', { name: 'Not signed out yet' })).toBeTruthy();
    expect(store.wipe).not.toHaveBeenCalled();
    expect(assign).not.toHaveBeenCalled();
  });
});
