import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { abilityFor } from '#schemas/abilities/ability.ts';
import { roles, unblindedByWork, type Role } from '#schemas/vocabulary/roles.ts';
import type { RouteDeclaration } from '#backend/http/route.ts';
import { Client, type Answer } from '#tests/support/client.ts';
import { call, idsOf, nameOf, seen } from '#tests/support/route-calls.ts';
import { startTestServer, type TestServer } from '#tests/support/server.ts';
import { aMember, aPerson, aStudy, signedIn, type Member } from '#tests/support/setup-builders.ts';

let server: TestServer;
let studyCode: string;
let studyId: string;
let routes: RouteDeclaration[];
const members = new Map<Role, Member>();
const outsiders = new Map<Role, Member>();

beforeAll(async () => {
  server = await startTestServer();
  const [here, elsewhere] = [await aStudy(server), await aStudy(server)];
  ({ code: studyCode, id: studyId } = here.study);
  for (const role of roles) {
    members.set(role, await aMember(server, role, role === 'administrator' ? null : here.study));
    if (role !== 'administrator') outsiders.set(role, await aMember(server, role, elsewhere.study));
  }
  routes = server.routes.toSorted((a, b) => Number(endsSession(a)) - Number(endsSession(b)));
});
afterAll(() => server.stop());

const endsSession = ({ method, path }: RouteDeclaration): boolean =>
  (method === 'delete' && path === '/session') || path === '/session/sign-out-everywhere';
const inStudy = ({ path }: RouteDeclaration): boolean => path.startsWith('/studies/:studyCode');

/** The one table: what the gate of a route says to somebody in this role, from the same rules as the server's. */
function expected({ gate, path }: RouteDeclaration, role: Role): 'passes' | 403 | 404 {
  if (gate === 'public' || gate === 'signed-in') return 'passes';
  const administrator = role === 'administrator';
  if (administrator && path.includes(':studyCode')) return 404;
  if (gate === 'person') return 'passes';
  const [action, subject] = gate;
  const ability = abilityFor({
    personId: randomUUID(),
    studyId: administrator ? null : studyId,
    role,
    siteIds: null,
    unblinded: unblindedByWork.includes(role),
  });
  if (ability.can(action, subject)) return 'passes';
  return action === 'read' ? 404 : 403;
}

/** Whether the gate refused; a handler names what it did not find, or that its state forbids it. */
const refusedAtGate = ({ status, body }: Answer): boolean =>
  (status === 403 && / you may not do this\.$/.test(String(body['detail']))) ||
  (status === 404 && /^This (study )?does not exist/.test(String(body['detail'])));

// proves AC-01
describe('the declared routes', () => {
  it('each name who may call; each change names its acts', () => {
    const careless = routes.filter(
      ({ gate, method, acts }) => gate === undefined || (method !== 'get' && acts === null),
    );
    expect(careless.map(nameOf)).toEqual([]);
    expect(new Set(routes.map(nameOf)).size).toBe(routes.length);
    expect(routes.length).toBeGreaterThan(90);
  });

  it('a read writes no act and a change is no GET', () => {
    const writing = routes.filter(({ method, acts }) => method === 'get' && acts !== null && acts.length > 0);
    expect(writing.map(nameOf)).toEqual([]);
  });

  it('answer 401 to whoever is not signed in', async () => {
    const stranger = new Client(server);
    const wrong: string[] = [];
    for (const declared of routes) {
      const { status } = await call(stranger, declared, { parameters: { studyCode } });
      if ((status === 401) === (declared.gate === 'public')) wrong.push(`${nameOf(declared)}: ${status}`);
    }
    expect(wrong).toEqual([]);
  });

  it.each(roles)('answer the %s as the table of roles says', async (role) => {
    const { client } = members.get(role)!;
    const wrong: string[] = [];
    for (const declared of routes) {
      const due = expected(declared, role);
      if (due === 'passes' && endsSession(declared)) continue;
      const answer = await call(client, declared, { parameters: { studyCode } });
      const right =
        due === 'passes'
          ? answer.status !== 401 &&
            // The random id of a row is absent in the same words.
            (!refusedAtGate(answer) || (answer.status === 404 && idsOf(declared).length > 0))
          : answer.status === due && refusedAtGate(answer);
      if (!right) wrong.push(`${nameOf(declared)}: ${answer.status} instead of ${due}`);
    }
    expect(wrong).toEqual([]);
  });

  it('give somebody signed in without a role nothing of any study', async () => {
    const { email } = await aPerson(server);
    const client = await signedIn(server, email);
    const wrong: string[] = [];
    for (const declared of routes.filter(({ gate }) => gate !== 'public' && gate !== 'signed-in')) {
      const { status } = await call(client, declared, { parameters: { studyCode } });
      const due = inStudy(declared) || (declared.gate as string[])[0] === 'read' ? 404 : 403;
      if (status !== due) wrong.push(`${nameOf(declared)}: ${status} instead of ${due}`);
    }
    expect(wrong).toEqual([]);
  });
});

// proves AC-02
it('another study is as absent as one that does not exist, whoever asks', async () => {
  const wrong: string[] = [];
  for (const [role, { client }] of outsiders) {
    for (const declared of routes.filter(inStudy)) {
      const ids = Object.fromEntries(idsOf(declared).map((name) => [name, randomUUID()]));
      const theirs = await call(client, declared, { parameters: { ...ids, studyCode } });
      const none = await call(client, declared, { parameters: { ...ids, studyCode: 'no-such-study' } });
      const same = JSON.stringify(seen(theirs)) === JSON.stringify(seen(none));
      if (theirs.status !== 404 || !same) wrong.push(`${role} ${nameOf(declared)}: ${theirs.status}`);
    }
  }
  expect(wrong).toEqual([]);
});

// proves WS-09
describe('what nobody meant to send', () => {
  const garbage: [string, unknown][] = [
    ['an empty object', {}],
    ['a list', []],
    ['a text', 'body'],
    ['nothing', null],
    ['fields of another', { role: 'administrator', studyId: randomUUID(), signedAt: '2026-01-01T00:00:00Z' }],
    ['keys of the prototype', JSON.parse('{"__proto__":{"a":1},"constructor":{"prototype":{"a":1}}}')],
    ['deep nesting', JSON.parse('{"a":'.repeat(400) + '1' + '}'.repeat(400))],
    ['a character that no text holds', { name: 'a\u0000b', email: '\ud800' }],
  ];

  /** Somebody the gate lets through: the abuse must reach what lies behind it. */
  const passing = (declared: RouteDeclaration): Client => {
    const role = roles.find((each) => expected(declared, each) === 'passes');
    if (role === undefined) throw new Error(`Nobody may call ${nameOf(declared)}.`);
    return members.get(role)!.client;
  };

  it.each(garbage)('a body that is %s never breaks the server, and is never taken', async (_, body) => {
    const wrong: string[] = [];
    for (const declared of routes.filter((each) => each.method !== 'get' && !endsSession(each))) {
      const answer = await call(passing(declared), declared, { parameters: { studyCode }, body });
      const problem = answer.headers.get('Content-Type')?.startsWith('application/problem+json');
      const mayBeEmpty = JSON.stringify(body) === '{}' && answer.status < 300;
      if (answer.status >= 500 || (!mayBeEmpty && !problem))
        wrong.push(`${nameOf(declared)}: ${answer.status} ${JSON.stringify(answer.body).slice(0, 160)}`);
    }
    expect(wrong).toEqual([]);
  });

  it('an unknown or doubled parameter is refused, and a cursor that was not made here', async () => {
    const wrong: string[] = [];
    for (const declared of routes.filter((each) => !endsSession(each))) {
      const known = Object.keys((declared.query as { properties?: object } | undefined)?.properties ?? {});
      const queries = [
        '?x=1',
        '?__proto__=1',
        '?x=1&x=2',
        ...known.flatMap((name) => [`?${name}=a&${name}=b`]),
        ...(known.includes('cursor') ? ['?cursor=garbage', '?cursor=WyJhIiwiYiIsImMiXQ', '?cursor=%00'] : []),
        ...(known.includes('limit') ? ['?limit=-1', '?limit=1e9', '?limit=0'] : []),
      ];
      for (const query of queries) {
        const answer = await call(passing(declared), declared, { parameters: { studyCode }, query });
        // A cursor is read where its list is: after the row it belongs to was looked for.
        const absent = answer.status === 404 && query.startsWith('?cursor=') && idsOf(declared).length > 0;
        if (answer.status !== 400 && !absent) wrong.push(`${nameOf(declared)}${query}: ${answer.status}`);
      }
    }
    expect(wrong).toEqual([]);
  });

  it('parameters with strange values, and ids that are none, never break the server', async () => {
    const values = ['%00', "';select pg_sleep(5)--", '%25%5F', '9'.repeat(300), '2026-13-45', '𝒳', '-1'];
    const wrong: string[] = [];
    for (const declared of routes.filter((each) => !endsSession(each))) {
      const known = Object.keys((declared.query as { properties?: object } | undefined)?.properties ?? {});
      for (const value of values) {
        const ids = Object.fromEntries(idsOf(declared).map((name) => [name, encodeURI(value)]));
        for (const query of ['', ...known.map((name) => `?${name}=${encodeURI(value)}`)]) {
          const client = passing(declared);
          const { status } = await call(client, declared, { parameters: { ...ids, studyCode }, query });
          if (status >= 500) wrong.push(`${nameOf(declared)} ${value} ${query}: ${status}`);
        }
      }
    }
    expect(wrong).toEqual([]);
  });
});
