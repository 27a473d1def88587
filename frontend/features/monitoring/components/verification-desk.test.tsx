import { createMongoAbility } from '@casl/ability';
import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { cleanup, fireEvent, render, screen, waitFor } from '@testing-library/react';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import type { AppAbility } from '#schemas/abilities/ability.ts';
import type { VisitDto } from '#schemas/api/capture.ts';
import type { VerificationDto, VerificationFieldDto } from '#schemas/api/monitoring.ts';
import { listenForShortcuts } from '../../../lib/keyboard/key-map.ts';
import { AbilityContext } from '../../../lib/session/ability.ts';
import { SessionContext, type Session } from '../../../lib/session/session.ts';
import { VerificationDesk } from './verification-desk.tsx';

const field = (address: string, state: VerificationFieldDto['state']): VerificationFieldDto => ({
  entryId: 'entry',
  revision: 6,
  step: 'Resting pressures',
  address,
  label: `Field ${address}`,
  value: { value: 118, written: '118', unit: 'mm[Hg]' },
  required: true,
  state,
  mark: null,
  openQueries: 0,
});
const desk = (second: VerificationFieldDto['state']): VerificationDto => ({
  visitId: 'visit',
  fields: [field('/a', 'verified'), field('/b', second), field('/c', 'open')],
  done: second === 'verified' ? 2 : 1,
  needed: 3,
});
const visit = { id: 'visit', participantId: 'p', participantCode: 'LQ-004-R', label: 'Visit 2' } as VisitDto;
const session = { acting: { sites: [] } } as unknown as Session;
const monitor = createMongoAbility<AppAbility>([
  { action: 'verify', subject: 'Entry' },
  { action: 'ask', subject: 'Query' },
]);

const fetching = vi.fn<typeof fetch>((_url, init) =>
  Promise.resolve(Response.json(desk(init?.method === 'POST' ? 'verified' : 'open'))),
);
let stopListening: () => void;

beforeEach(() => {
  vi.stubGlobal('fetch', fetching);
  stopListening = listenForShortcuts(document);
});
afterEach(() => {
  stopListening();
  cleanup();
  fetching.mockClear();
  vi.unstubAllGlobals();
});

async function open(sourceId: string | null) {
  render(
    <QueryClientProvider client={new QueryClient()}>
      <SessionContext value={session}>
        <AbilityContext value={monitor}>
          <VerificationDesk study="S" visit={visit} sourceId={sourceId} />
        </AbilityContext>
      </SessionContext>
    </QueryClientProvider>,
  );
  await screen.findByText('1 of 3 fields verified');
}

const current = () => document.querySelector('[aria-current="true"]')?.textContent;
const posted = () => fetching.mock.calls.filter(([, init]) => init?.method === 'POST');

describe('VerificationDesk', () => {
  it('begins at the first value that waits', async () => {
    await open('source');
    expect(current()).toBe('Field /b');
  });

  it('verifies the current value by "v" at the revision seen, and goes on', async () => {
    await open('source');
    fireEvent.keyDown(document.body, { key: 'v' });
    await screen.findByText('2 of 3 fields verified');
    expect(posted()[0]?.[1]?.body).toBe(
      JSON.stringify({
        sourceDocumentId: 'source',
        fields: [{ entryId: 'entry', revision: 6, address: '/b' }],
      }),
    );
    await waitFor(() => expect(current()).toBe('Field /c'));
  });

  it('does not verify without a source, and says why', async () => {
    await open(null);
    fireEvent.keyDown(document.body, { key: 'v' });
    // A request would be sent by the next turn.
    await new Promise((resolve) => setTimeout(resolve));
    expect(posted()).toHaveLength(0);
    expect(screen.getByText(/Choose a source document that stands/)).toBeTruthy();
  });

  it('goes to the next value by "n", and gives it the focus', async () => {
    await open('source');
    fireEvent.keyDown(document.body, { key: 'n' });
    await waitFor(() => expect(document.activeElement?.textContent).toBe('Field /c'));
  });

  it('asks by "q" about the current value', async () => {
    await open('source');
    fireEvent.keyDown(document.body, { key: 'q' });
    expect(await screen.findByRole('dialog', { name: 'Ask about Field /b' })).toBeTruthy();
  });
});
