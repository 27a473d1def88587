import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { cleanup, fireEvent, render, screen, waitFor } from '@testing-library/react';
import { afterEach, describe, expect, it, vi } from 'vitest';
import type { SignaturePreparationDto } from '#schemas/api/records.ts';
import { SignVisitDialog } from './sign-visit-dialog.tsx';

const preparation = (contentHash: string): SignaturePreparationDto => ({
  visitId: 'visit',
  meaning: 'I have reviewed this visit.',
  withoutUnblindingValues: true,
  covered: [{ type: 'entry', id: 'e', revision: 6, hash: 'h', label: 'Resting pressures' }],
  contentHash,
  preparation: `seal-of-${contentHash}`,
});

afterEach(() => {
  cleanup();
  vi.unstubAllGlobals();
});

const open = (fetching: typeof fetch, onClose = vi.fn()) => {
  vi.stubGlobal('fetch', fetching);
  render(
    <QueryClientProvider client={new QueryClient()}>
      <SignVisitDialog study="S" visitId="visit" onClose={onClose} />
    </QueryClientProvider>,
  );
  return onClose;
};

describe('SignVisitDialog', () => {
  it('shows what is covered and, above the password, that hidden values are not', async () => {
    open(() => Promise.resolve(Response.json(preparation('a'))));
    expect(await screen.findByText('Resting pressures, revision 6')).toBeTruthy();
    const hidden = screen.getByText(/Values hidden until unblinding are not shown to you/);
    const password = screen.getByLabelText(/Your password/);
    expect(hidden.compareDocumentPosition(password) & Node.DOCUMENT_POSITION_FOLLOWING).toBeTruthy();
  });

  it('prepares anew when what was shown is too old, and does not close', async () => {
    let prepared = 0;
    const sent: string[] = [];
    const onClose = open((_url, init) => {
      if (init?.method !== 'POST') {
        prepared += 1;
        return Promise.resolve(Response.json(preparation(prepared === 1 ? 'a' : 'b')));
      }
      sent.push(init.body as string);
      return Promise.resolve(
        sent.length === 1
          ? Response.json({ title: 'Changed', detail: 'Look at it again.' }, { status: 412 })
          : Response.json([], { status: 201 }),
      );
    });
    const sign = () => fireEvent.click(screen.getByRole('button', { name: 'Sign this visit' }));
    fireEvent.change(await screen.findByLabelText(/Your password/), { target: { value: 'secret' } });
    sign();
    expect(await screen.findByText('Look at it again.')).toBeTruthy();
    expect(onClose).not.toHaveBeenCalled();
    sign();
    await waitFor(() => expect(onClose).toHaveBeenCalled());
    expect(sent.map((body) => (JSON.parse(body) as { contentHash: string }).contentHash)).toEqual(['a', 'b']);
  });
});
