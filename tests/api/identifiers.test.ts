import { randomBytes } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import type { IdentifiersDto, IdentifiersReadingDto, ParticipantDto } from '#schemas/api/participants.ts';
import { readIdentifiers } from '#backend/modules/participants/identifiers.service.ts';
import { acting, someone } from '#tests/support/acting.ts';
import { Client, type Answer } from '#tests/support/client.ts';
import {
  aRunningStudy,
  enrol,
  setStudyState,
  someIdentifiers,
  type RunningStudy,
} from '#tests/support/participants-builders.ts';
import { startTestServer, type TestServer } from '#tests/support/server.ts';
import { aMember, type Member } from '#tests/support/setup-builders.ts';
import { eventCount, newestEvents } from '#tests/support/trail.ts';

/** Every identifier of the one participant here; found anywhere else, it has leaked. */
const canaries = {
  name: 'Quillon Featherstitch',
  birthDate: '1957-08-23',
  phone: '+44 1632 960777',
  email: 'quillon.featherstitch@example.test',
  postcode: 'ZQ9 7XW',
  recordNumber: 'HX-4471-99',
};

let server: TestServer;
let running: RunningStudy;
let participant: ParticipantDto;
let url: string;
let monitor: Member;
let physician: Member;

beforeAll(async () => {
  server = await startTestServer();
  running = await aRunningStudy(server);
  participant = await enrol(running, running.sites[1]!, canaries);
  url = `${running.path}/participants/${participant.id}/identifiers`;
  monitor = await aMember(server, 'monitor', running.study);
  physician = await aMember(server, 'study-physician', running.study);
});
afterAll(() => server.stop());

const read = (client: Client, reason?: string) =>
  client.post<IdentifiersDto>(`${url}/reading`, reason === undefined ? {} : { reason });

async function refused(work: () => Promise<Answer<unknown>>, status: number, slug?: string): Promise<void> {
  const before = await eventCount(server, running.study.id);
  const answer = await work();
  expect(answer, JSON.stringify(answer.body)).toMatchObject({ status, ...(slug ? { body: { slug } } : {}) });
  expect(await eventCount(server, running.study.id)).toBe(before);
  for (const canary of Object.values(canaries)) expect(JSON.stringify(answer.body)).not.toContain(canary);
}

/** Notices of events, among the mail to this address. */
const noticesTo = (email: string) =>
  server.ownerSql<{ template: string; params: Record<string, unknown> }>(
    "select template, params from mail_outbox where recipient = $1 and template = 'study-event' order by created_at",
    [email],
  );

describe('reading direct identifiers', () => {
  // proves CP-05
  it('is one event for each look of those who look after the participant', async () => {
    for (const { client, personId } of [running.coordinator, monitor, physician]) {
      const before = await eventCount(server, running.study.id);
      const answer = await read(client);
      expect(answer).toMatchObject({
        status: 200,
        etag: '"1"',
        body: { ...canaries, revision: 1, until: null },
      });
      expect(answer.headers.get('Cache-Control')).toBe('no-store');
      expect(await eventCount(server, running.study.id)).toBe(before + 1);
      const [event] = await newestEvents(server, running.study.id);
      expect(event).toMatchObject({
        kind: 'identifiers-read',
        actor_id: personId,
        subject: `direct-identifiers/${participant.id}`,
        participant_id: participant.id,
        site_id: participant.siteId,
        reason: null,
        values: {},
      });
    }
  });

  it('is refused to everybody else, and nothing is shown', async () => {
    await refused(() => read(new Client(server)), 401, 'not-signed-in');
    await refused(() => read(running.technician.client), 403, 'not-allowed');
    const statistician = await aMember(server, 'statistician', running.study);
    await refused(() => read(statistician.client), 404, 'not-found');
    const administrator = await aMember(server, 'administrator', null);
    await refused(() => read(administrator.client), 404);
    const elsewhere = await aMember(server, 'coordinator', running.study, {
      siteIds: [running.sites[0]!.id],
    });
    await refused(() => read(elsewhere.client), 404, 'not-found');
    const stranger = (await aRunningStudy(server)).coordinator;
    await refused(() => read(stranger.client), 404);
    await refused(
      () => running.coordinator.client.post(`${url}/reading`, { reason: 'x', fields: ['name'] }),
      422,
    );
    expect((await running.coordinator.client.get(`${url}`)).status).toBe(404);
  });

  it('goes on when the study is locked: looking changes no study data', async () => {
    const other = await aRunningStudy(server);
    const one = await enrol(other, other.sites[0]!);
    await setStudyState(server, other.study, 'locked');
    const there = `${other.path}/participants/${one.id}/identifiers`;
    expect((await other.coordinator.client.post(`${there}/reading`, {})).status).toBe(200);
    const write = await other.coordinator.client.put(
      there,
      { identifiers: someIdentifiers(), reason: 'a slip' },
      { ifMatch: 1 },
    );
    expect(write).toMatchObject({ status: 409, body: { slug: 'study-locked' } });
  });

  // proves AC-07
  it('is urgent for the investigator: with a reason, told to others, and over after fifteen minutes', async () => {
    const { client, email } = running.investigator;
    const second = await aMember(server, 'principal-investigator', running.study);
    await refused(() => read(client), 422, 'invalid-body');
    const answer = await read(client, 'found unconscious at the bus stop');
    expect(answer).toMatchObject({ status: 200, body: canaries });
    const minutes = (Date.parse(answer.body.until!) - Date.now()) / 60_000;
    expect(minutes).toBeGreaterThan(14);
    expect(minutes).toBeLessThanOrEqual(15);
    expect(await newestEvents(server, running.study.id)).toMatchObject([
      {
        kind: 'identifiers-read',
        reason: 'found unconscious at the bus stop',
        actor_id: running.investigator.personId,
      },
    ]);

    const notices = [...(await noticesTo(second.email)), ...(await noticesTo(monitor.email))];
    expect(notices.map(({ template, params }) => [template, params['event']])).toEqual([
      ['study-event', 'identifiers-opened'],
      ['study-event', 'identifiers-opened'],
    ]);
    expect(await noticesTo(email)).toEqual([]);
    // proves EM-01
    for (const canary of [...Object.values(canaries), participant.code, participant.id, 'bus stop']) {
      expect(JSON.stringify(notices)).not.toContain(canary);
    }

    const again = await read(client);
    expect(again).toMatchObject({ status: 200, body: { until: answer.body.until } });
    expect(await newestEvents(server, running.study.id)).toMatchObject([
      { kind: 'identifiers-read', reason: null },
    ]);
    await refused(() => read(second.client), 422);
    const other = await enrol(running, running.sites[1]!);
    await refused(() => client.post(`${running.path}/participants/${other.id}/identifiers/reading`, {}), 422);

    vi.useFakeTimers({ toFake: ['Date'], now: Date.parse(answer.body.until!) + 1000 });
    try {
      await refused(() => read(client), 422, 'invalid-body');
    } finally {
      vi.useRealTimers();
    }
  });

  // proves CP-05 and CP-08
  it('is listed: who, when, why; for those who may see them too', async () => {
    const list = (client: Client, query = '') =>
      client.get<{ items: IdentifiersReadingDto[]; nextCursor: string | null }>(`${url}/readings${query}`);
    const whole = (await list(monitor.client)).body.items;
    expect(whole).toHaveLength(5);
    expect(whole[1]).toMatchObject({
      by: running.investigator.name,
      role: 'principal-investigator',
      reason: 'found unconscious at the bus stop',
    });
    expect(whole[4]).toMatchObject({ by: running.coordinator.name, role: 'coordinator', reason: null });
    const first = (await list(running.investigator.client, '?limit=3')).body;
    const rest = (await list(running.investigator.client, `?limit=3&cursor=${first.nextCursor}`)).body;
    expect([...first.items, ...rest.items]).toEqual(whole);
    expect(rest.nextCursor).toBeNull();
    expect((await list(running.technician.client)).status).toBe(403);
    expect((await list(new Client(server))).status).toBe(401);
    const elsewhere = await aMember(server, 'monitor', running.study, { siteIds: [running.sites[0]!.id] });
    expect((await list(elsewhere.client)).status).toBe(404);
  });
});

describe('correcting direct identifiers', () => {
  const changed = { ...canaries, name: 'Quillon Featherstitch-Ames', phone: null };
  const put = (
    client: Client,
    ifMatch?: number,
    body: object = { identifiers: changed, reason: 'married' },
  ) => client.put(url, body, ifMatch ? { ifMatch } : {});

  it('is refused without right, revision or reason, and for somebody who is enrolled already', async () => {
    const { client } = running.coordinator;
    await refused(() => put(new Client(server), 1), 401);
    for (const member of [monitor, physician, running.investigator, running.technician]) {
      await refused(() => put(member.client, 1), 403);
    }
    const elsewhere = await aMember(server, 'coordinator', running.study, {
      siteIds: [running.sites[0]!.id],
    });
    await refused(() => put(elsewhere.client, 1), 404);
    await refused(() => put(client), 428);
    await refused(() => put(client, 7), 412, 'stale-revision');
    await refused(() => put(client, 1, { identifiers: changed }), 422);
    const other = someIdentifiers({ name: 'Canary Already Here' });
    await enrol(running, running.sites[0]!, other);
    await refused(() => put(client, 1, { identifiers: other, reason: 'a slip' }), 409, 'already-exists');
  });

  it('seals them anew under the current key, older rows stay readable by theirs', async () => {
    const answer = await put(running.coordinator.client, 1);
    expect(answer).toMatchObject({ status: 204, etag: '"2"' });
    expect(await newestEvents(server, running.study.id)).toMatchObject([
      {
        kind: 'identifiers-written',
        reason: 'married',
        values: { 'direct-identifiers/name': { written: true }, 'direct-identifiers/phone': null },
      },
    ]);
    expect((await read(running.coordinator.client)).body).toMatchObject({ ...changed, revision: 2 });

    const { identity } = server.settings;
    const rotated = {
      ...identity,
      currentKeyId: 'newer',
      keys: { newer: randomBytes(32), ...identity.keys },
    };
    const asCoordinator = someone(
      {
        personId: running.coordinator.personId,
        studyId: running.study.id,
        role: 'coordinator',
        siteIds: null,
        unblinded: false,
      },
      running.coordinator.membershipId,
    );
    const shown = await acting(server.orm, asCoordinator, () =>
      readIdentifiers(server.orm.em, rotated, participant.id, null),
    );
    expect(shown.name).toBe(changed.name);
  });
});

// proves CP-05 and AT-08
it('leaves no identifier anywhere else: not in the trail, values, mail, jobs, keys, sessions, nor in a dump of the store', async () => {
  const tables = await server.ownerSql<{ schema: string; name: string }>(
    `select table_schema as schema, table_name as name from information_schema.tables
      where table_type = 'BASE TABLE' and table_schema not in ('pg_catalog', 'information_schema')`,
  );
  expect(tables.map(({ name }) => name)).toEqual(
    expect.arrayContaining(['audit_event', 'recorded_value', 'direct_identifiers', 'mail_outbox']),
  );
  const hex = Object.values(canaries).map((canary) => Buffer.from(canary).toString('hex'));
  for (const { schema, name } of tables) {
    const rows = await server.ownerSql<{ text: string }>(
      `select t::text as text from "${schema}"."${name}" t`,
    );
    const text = rows.map((row) => row.text).join('\n');
    for (const canary of [...Object.values(canaries), ...hex])
      expect(text.includes(canary), `${name}: ${canary}`).toBe(false);
  }
});
