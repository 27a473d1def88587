import { packRules } from '@casl/ability/extra';
import { QueryClientProvider } from '@tanstack/react-query';
import { act, cleanup, fireEvent, render, screen, within } from '@testing-library/react';
import { createMemoryRouter, RouterProvider } from 'react-router-dom';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { abilityFor } from '#schemas/abilities/ability.ts';
import type { Role } from '#schemas/vocabulary/roles.ts';
import { createQueryClient } from '../lib/query-client.ts';
import type { Session } from '../lib/session/session.ts';
import { sessionQuery } from '../lib/session/session.ts';
import { routeTree } from './router.tsx';

type Answers = Record<string, (body: unknown) => [status: number, body?: unknown]>;

const sessionAs = (role: Role, studyCode = 'SCREEPATH'): Session => ({
  person: { id: 'person-1', name: 'Ivo Varro', email: 'ivo@example.test' },
  memberships: [
    { id: 'm-1', studyCode, studyName: 'Haemodilution', role, siteIds: null, unblinded: false },
    {
      id: 'm-2',
      studyCode: 'REEDGRIP',
      studyName: 'Handgrip',
      role: 'coordinator',
      siteIds: null,
      unblinded: false,
    },
  ],
  acting: {
    membershipId: 'm-1',
    studyCode,
    studyName: 'Haemodilution',
    studyState: 'running',
    role,
    sites: [],
    unblinded: false,
  },
  deviceKey: '',
  rules: packRules(
    abilityFor({ personId: 'person-1', studyId: 's-1', role, siteIds: null, unblinded: false }).rules,
  ),
});
const now = { items: [], figures: [] };
const refused: [number, unknown] = [401, { title: 'You are not signed in', slug: 'not-signed-in' }];

function serve(answers: Answers) {
  vi.stubGlobal('fetch', (url: string, init?: RequestInit) => {
    const request = `${init?.method ?? 'GET'} ${url.replace('/api/v1', '')}`;
    const [status, body] = answers[request]?.(init?.body ? JSON.parse(init.body as string) : undefined) ?? [
      404,
      {},
    ];
    return Promise.resolve(
      new Response(body === undefined ? null : JSON.stringify(body), {
        status,
        headers: { 'Content-Type': 'application/json' },
      }),
    );
  });
}

function open(address: string) {
  const client = createQueryClient();
  const router = createMemoryRouter(routeTree, { initialEntries: [address] });
  render(
    <QueryClientProvider client={client}>
      <RouterProvider router={router} />
    </QueryClientProvider>,
  );
  return { client, router };
}

beforeEach(() => localStorage.clear());
afterEach(() => {
  cleanup();
  vi.unstubAllGlobals();
});

describe('signing in', () => {
  const demo = {
    accounts: [
      { email: 'ivo@example.test', password: 'walks the path', name: 'Ivo Varro', roles: 'coordinator' },
    ],
  };

  it('lists the accounts of a demo system, fills the form with one, and leads where one wanted to go', async () => {
    let session: Session | undefined;
    const signIn = vi.fn<(body: unknown) => [number, unknown]>(() => {
      session = sessionAs('coordinator');
      return [201, session];
    });
    serve({
      'GET /status': () => [200, { version: '1', demo }],
      'GET /session': () => (session ? [200, session] : refused),
      'POST /session': signIn,
      'GET /studies/SCREEPATH/now': () => [200, now],
    });
    const { router } = open('/studies/SCREEPATH/now');
    fireEvent.click(await screen.findByRole('button', { name: /coordinator/ }));
    fireEvent.click(screen.getByRole('button', { name: 'Sign in' }));
    expect(await screen.findByRole('heading', { name: 'What needs you now' })).toBeTruthy();
    expect(signIn).toHaveBeenCalledWith({ email: 'ivo@example.test', password: 'walks the path' });
    expect(router.state.location.pathname).toBe('/studies/SCREEPATH/now');
  });

  it('lists no accounts on a real system', async () => {
    serve({ 'GET /status': () => [200, { version: '1', demo: null }], 'GET /session': () => refused });
    open('/sign-in');
    expect(await screen.findByRole('button', { name: 'Sign in' })).toBeTruthy();
    expect(screen.queryByText('Demo accounts')).toBeNull();
  });

  it('says why it was refused and keeps what was typed', async () => {
    serve({
      'GET /status': () => [200, { version: '1', demo: null }],
      'GET /session': () => refused,
      'POST /session': () => [
        401,
        { title: 'Sign-in was refused', detail: 'E-mail or password is not right.' },
      ],
    });
    open('/sign-in');
    fireEvent.change(await screen.findByLabelText(/E-mail/), { target: { value: 'ivo@example.test' } });
    fireEvent.change(screen.getByLabelText(/Password/), { target: { value: 'wrong' } });
    fireEvent.click(screen.getByRole('button', { name: 'Sign in' }));
    expect((await screen.findByRole('alert')).textContent).toContain('E-mail or password is not right.');
    expect(screen.getByLabelText(/E-mail/)).toHaveProperty('value', 'ivo@example.test');
    expect(screen.getByLabelText(/Password/)).toHaveProperty('value', 'wrong');
  });
});

describe('the frame', () => {
  const signedIn = (role: Role): Answers => ({
    'GET /session': () => [200, sessionAs(role)],
    'GET /studies/SCREEPATH/now': () => [200, now],
  });
  const tabs = async () =>
    within(await screen.findByRole('navigation', { name: 'SCREEPATH' }))
      .getAllByRole('link')
      .map(({ textContent }) => textContent);

  it.each<[Role, string[], string[]]>([
    [
      'coordinator',
      ['Participants', 'Visit ribbon', 'Queries'],
      ['Verification desk', 'Cuts', 'Audit trail'],
    ],
    ['monitor', ['Verification desk', 'Audit trail'], ['Exports']],
    ['statistician', ['Cuts', 'Plans', 'Runs', 'Exports'], ['Participants', 'Visits', 'Queries']],
  ])('shows a %s only the tabs that the role can use', async (role, shown, hidden) => {
    serve(signedIn(role));
    open('/studies/SCREEPATH/now');
    const present = await tabs();
    expect(present).toEqual(expect.arrayContaining(['Now', ...shown, 'Help']));
    for (const tab of hidden) expect(present).not.toContain(tab);
  });

  it('lists the keys on ? and goes to a tab by g and a letter', async () => {
    serve(signedIn('coordinator'));
    const { router } = open('/help');
    await tabs();
    fireEvent.keyDown(document.body, { key: '?' });
    expect(screen.getByRole('dialog', { name: 'Keys on this page' }).textContent).toContain('Go to Now');
    fireEvent.click(screen.getByRole('button', { name: 'Close' }));
    fireEvent.keyDown(document.body, { key: 'g' });
    fireEvent.keyDown(document.body, { key: 'n' });
    expect(await screen.findByRole('heading', { name: 'What needs you now' })).toBeTruthy();
    expect(router.state.location.pathname).toBe('/studies/SCREEPATH/now');
  });

  it('offers the role in which a link into another study opens', async () => {
    serve(signedIn('monitor'));
    open('/studies/REEDGRIP/now');
    expect(await screen.findByRole('button', { name: 'Act as coordinator' })).toBeTruthy();
  });

  it('says nothing of a study that one is not in', async () => {
    serve(signedIn('monitor'));
    open('/studies/OTHER/now');
    expect(await screen.findByText('Your role does not open this')).toBeTruthy();
  });

  // proves AX-06
  it('keeps the page and what was typed when the session ends, and asks to sign in over it', async () => {
    serve(signedIn('coordinator'));
    const { client } = open('/account');
    fireEvent.click(await screen.findByRole('button', { name: 'Change the keys for List the keys' }));
    fireEvent.change(screen.getByLabelText('Keys for List the keys'), { target: { value: 'k' } });
    act(() => {
      client.setQueryData(sessionQuery.queryKey, null);
    });
    expect(await screen.findByRole('dialog', { name: 'You were signed out' })).toBeTruthy();
    expect(screen.getByLabelText('Keys for List the keys')).toHaveProperty('value', 'k');
  });
});
