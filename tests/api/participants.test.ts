import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { ParticipantDto } from '#schemas/api/participants.ts';
import { parseParticipantCode } from '#schemas/participants/participant-code.ts';
import { whatCodeTells } from '#schemas/participants/telling-code.ts';
import { act } from '#backend/database/act.ts';
import { assertConsented, recordCompletion, recordConsent } from '#backend/modules/participants/index.ts';
import { acting, theSystem } from '#tests/support/acting.ts';
import { Client, type Answer } from '#tests/support/client.ts';
import {
  aProtocol,
  aRunningStudy,
  consent,
  eligible,
  enrol,
  publishProtocol,
  setStudyState,
  someIdentifiers,
  type RunningStudy,
} from '#tests/support/participants-builders.ts';
import { startTestServer, type TestServer } from '#tests/support/server.ts';
import { aMember, aStudy, type Member } from '#tests/support/setup-builders.ts';
import { eventCount, newestEvents } from '#tests/support/trail.ts';

let server: TestServer;
let running: RunningStudy;
let path: string;
let coordinator: Member;

interface List {
  items: ParticipantDto[];
  nextCursor: string | null;
}

beforeAll(async () => {
  server = await startTestServer();
  running = await aRunningStudy(server);
  ({ coordinator } = running);
  path = `${running.path}/participants`;
});
afterAll(() => server.stop());

const today = new Date().toISOString().slice(0, 10);
const tomorrow = new Date(Date.now() + 86_400_000).toISOString().slice(0, 10);
const post = (client: Client, body: unknown, headers?: Record<string, string>) =>
  client.post<ParticipantDto>(path, body, headers ? { headers } : {});
const get = (client: Client, id: string): Promise<Answer<ParticipantDto>> => client.get(`${path}/${id}`);

/** A refusal of this status and slug that left nothing behind. */
async function refused(work: () => Promise<Answer<unknown>>, status: number, slug?: string) {
  const before = await eventCount(server, running.study.id);
  const answer = await work();
  expect(answer, JSON.stringify(answer.body)).toMatchObject({ status, ...(slug ? { body: { slug } } : {}) });
  expect(await eventCount(server, running.study.id)).toBe(before);
  return answer.body as { detail: string; errors?: { pointer: string; detail: string }[] };
}

describe('enrolling a participant', () => {
  it('gives a code, keeps the identifiers apart, and leaves one event that names none of them', async () => {
    const identifiers = someIdentifiers({
      phone: '+44 1632 960001',
      email: 'c@example.test',
      recordNumber: 'R-77',
    });
    const site = running.sites[1]!;
    const answer = await post(coordinator.client, { siteId: site.id, identifiers });
    expect(answer).toMatchObject({
      status: 201,
      etag: '"1"',
      body: { siteCode: 'UP', state: 'screening', enrolledOn: today, allocation: null, consentedOn: null },
    });
    expect(parseParticipantCode(answer.body.code)).toMatchObject({ siteLetters: 'UP' });
    expect((await get(coordinator.client, answer.body.id)).body).toEqual(answer.body);
    const byCode = await coordinator.client.get(
      `${path}/by-code/${answer.body.code.toLowerCase().replaceAll('-', '')}`,
    );
    expect(byCode.body).toEqual(answer.body);

    const [event] = await newestEvents(server, running.study.id);
    expect(event).toMatchObject({
      kind: 'participant-enrolled',
      actor_id: coordinator.personId,
      subject: `participant/${answer.body.id}`,
      participant_id: answer.body.id,
      site_id: site.id,
      values: { 'participant/state': 'screening', 'direct-identifiers/name': { written: true } },
    });
    expect(JSON.stringify(event)).not.toContain('Canary');
  });

  // proves CP-04
  it('hands out codes in order without gaps, however many enrol at once, and none tells of its person', async () => {
    const other = await aRunningStudy(server);
    const people = Array.from({ length: 24 }, (_, at) =>
      someIdentifiers({
        birthDate: `19${40 + at}-0${(at % 9) + 1}-${10 + (at % 18)}`,
        recordNumber: `R-${at}`,
      }),
    );
    const answers = await Promise.all(people.map((one) => enrol(other, other.sites[0]!, one)));
    const numbers = answers.map(({ code }) => parseParticipantCode(code)!.number).sort((a, b) => a - b);
    expect(new Set(numbers).size).toBe(24);
    answers.forEach(({ code }, at) => expect(whatCodeTells(code, { ...people[at]! })).toBeNull());
    // A number that was passed over for one person is the next one's; those left lack a code for the last ones only.
    const last = someIdentifiers({ name: 'Xu', birthDate: '1999-12-31' });
    const next = parseParticipantCode((await enrol(other, other.sites[0]!, last)).code)!.number;
    const given = new Set([...numbers, next]);
    const without = Array.from({ length: next - 1 }, (_, at) => at + 1).filter(
      (number) => !given.has(number),
    );
    const codes = without.map((number) => `TN${String(number).padStart(3, '0')}`);
    for (const code of codes) expect(parseableWithSomeCheck(code, last)).toBe(false);
  });

  it('answers the same when it is sent again with its key, and refuses the key for another', async () => {
    const body = { siteId: running.sites[0]!.id, identifiers: someIdentifiers() };
    const headers = { 'Idempotency-Key': randomUUID() };
    const [first, twin] = await Promise.all([
      post(coordinator.client, body, headers),
      post(coordinator.client, body, headers),
    ]);
    expect([first.status, twin.status]).toEqual([201, 201]);
    expect(twin.body).toEqual(first.body);
    const again = await post(coordinator.client, body, headers);
    expect(again.body).toEqual(first.body);
    await refused(
      () => post(coordinator.client, { ...body, identifiers: someIdentifiers() }, headers),
      422,
      'key-reused',
    );
  });

  // proves CP-05
  it('keeps no digest that could be guessed from a list of names', async () => {
    const body = { siteId: running.sites[0]!.id, identifiers: someIdentifiers() };
    const key = randomUUID();
    await post(coordinator.client, body, { 'Idempotency-Key': key });
    const [row] = await server.ownerSql<{ body_hash: string }>(
      'select body_hash from idempotency_key where key = $1',
      [key],
    );
    const { createHash } = await import('node:crypto');
    const plain = createHash('sha256')
      .update(`POST ${path} ${JSON.stringify(body)}`)
      .digest('hex');
    expect(row?.body_hash).toMatch(/^[0-9a-f]{64}$/);
    expect(row?.body_hash).not.toBe(plain);
  });

  it('refuses somebody who is enrolled already, naming the code only to those who may know it', async () => {
    const identifiers = someIdentifiers({ name: 'Canary Zoë O’Finch-Lark' });
    const known = await enrol(running, running.sites[1]!, identifiers);
    const again = { ...identifiers, name: "O'Finch Lark, canary zoe" };
    const own = await refused(
      () => post(coordinator.client, { siteId: running.sites[0]!.id, identifiers: again }),
      409,
      'already-exists',
    );
    expect(own.detail).toContain(known.code);
    const elsewhere = await aMember(server, 'coordinator', running.study, {
      siteIds: [running.sites[0]!.id],
    });
    const other = await refused(
      () => post(elsewhere.client, { siteId: running.sites[0]!.id, identifiers: again }),
      409,
    );
    expect(other.detail).toContain('at another site');
    expect(other.detail).not.toContain(known.code);
    const race = someIdentifiers();
    const both = await Promise.all(
      running.sites.map((site) => post(coordinator.client, { siteId: site.id, identifiers: race })),
    );
    expect(both.map(({ status }) => status).sort()).toEqual([201, 409]);
  });

  it('refuses whoever may not, and other sites', async () => {
    const siteId = running.sites[1]!.id;
    const body = () => ({ siteId, identifiers: someIdentifiers() });
    await refused(() => post(new Client(server), body()), 401, 'not-signed-in');
    for (const role of [
      'principal-investigator',
      'monitor',
      'study-physician',
      'unblinded-technician',
    ] as const) {
      const member = await aMember(server, role, running.study);
      await refused(() => post(member.client, body()), 403, 'not-allowed');
    }
    const elsewhere = await aMember(server, 'coordinator', running.study, {
      siteIds: [running.sites[0]!.id],
    });
    await refused(() => post(elsewhere.client, body()), 403, 'not-allowed');
    const stranger = (await aRunningStudy(server)).coordinator;
    await refused(() => post(stranger.client, body()), 404);
    await refused(() => post(coordinator.client, { ...body(), siteId: randomUUID() }), 404);
  });

  it.each([
    ['a code chosen by a person', { code: 'UP-014-Z' }, '/code'],
    [
      'an unknown identifier',
      { identifiers: { ...someIdentifiers(), initials: 'CF' } },
      '/identifiers/initials',
    ],
    ['no name', { identifiers: { name: '  ', birthDate: '1980-01-01' } }, '/identifiers/name'],
    [
      'a birth date to come',
      { identifiers: { name: 'A Bee', birthDate: tomorrow } },
      '/identifiers/birthDate',
    ],
    [
      'an age of 130 years',
      { identifiers: { name: 'A Bee', birthDate: '1890-01-01' } },
      '/identifiers/birthDate',
    ],
    ['a day to come', { enrolledOn: tomorrow }, '/enrolledOn'],
    ['a prototype key', JSON.parse('{"__proto__":{"a":1}}') as object, '/__proto__'],
  ])('refuses %s, at its field', async (_, wrong, pointer) => {
    const sound = { siteId: running.sites[0]!.id, identifiers: someIdentifiers() };
    const body = JSON.parse(
      `{${JSON.stringify(sound).slice(1, -1)},${JSON.stringify(wrong).slice(1)}`,
    ) as object;
    const problem = await refused(
      () =>
        post(
          coordinator.client,
          '__proto__' in wrong && Object.keys(wrong)[0] === '__proto__' ? wrong : body,
        ),
      422,
      'invalid-body',
    );
    if (pointer !== '/__proto__') expect(problem.errors?.map((error) => error.pointer)).toContain(pointer);
  });

  // proves RB-01
  it('waits for a running study, a published protocol and a sealed list', async () => {
    const { study, sites } = await aStudy(server);
    const member = await aMember(server, 'coordinator', study);
    const technician = await aMember(server, 'unblinded-technician', study);
    const there = `/studies/${study.code}/participants`;
    const attempt = async () => {
      const answer = await member.client.post<{ detail: string }>(there, {
        siteId: sites[0]!.id,
        identifiers: someIdentifiers(),
      });
      return `${answer.status} ${answer.body.detail}`;
    };
    expect(await attempt()).toMatch(/^409 The study is being set up/);
    await setStudyState(server, study, 'running');
    expect(await attempt()).toMatch(/^409 Publish the protocol/);
    await publishProtocol(server, study, technician.personId, aProtocol(['AA', 'BB']));
    expect(await attempt()).toMatch(/^409 The unblinded technician must seal/);
    await technician.client.post(`/studies/${study.code}/allocation`, { blockSizes: [4], slotsPerSite: 8 });
    expect(await attempt()).toMatch(/^201/);
    // proves LK-01
    await setStudyState(server, study, 'locked');
    expect(await attempt()).toMatch(/^409 The study is locked/);
  });

  it('needs no list where everybody gets the same', async () => {
    const { study, sites } = await aStudy(server);
    const member = await aMember(server, 'coordinator', study);
    const sequences = [{ key: 'only', label: 'Only', conditions: ['cond-alder'] }];
    await publishProtocol(
      server,
      study,
      member.personId,
      aProtocol(['AA', 'BB'], { design: 'single-group', sequences }),
    );
    await setStudyState(server, study, 'running');
    const answer = await member.client.post(`/studies/${study.code}/participants`, {
      siteId: sites[0]!.id,
      identifiers: someIdentifiers(),
    });
    expect(answer.status).toBe(201);
  });
});

describe('the list of participants', () => {
  it('is paged by code, filtered, and holds only those of own sites, without a name', async () => {
    const other = await aRunningStudy(server);
    const there = `${other.path}/participants`;
    for (const site of [0, 1, 0, 1, 0]) await enrol(other, other.sites[site]!);
    const { client } = other.coordinator;
    const whole = (await client.get<List>(there)).body;
    expect(whole.items).toHaveLength(5);
    const pages: string[] = [];
    for (let cursor: string | null = ''; cursor !== null;) {
      const page: List = (await client.get<List>(`${there}?limit=2${cursor ? `&cursor=${cursor}` : ''}`))
        .body;
      pages.push(...page.items.map(({ code }) => code));
      cursor = page.nextCursor;
    }
    expect(pages).toEqual(whole.items.map(({ code }) => code));
    expect(pages).toEqual([...pages].sort());

    const codes = async (query: string, as = client) =>
      (await as.get<List>(`${there}${query}`)).body.items.map(({ siteCode }) => siteCode);
    expect(await codes(`?site=${other.sites[1]!.id}`)).toEqual(['UP', 'UP']);
    expect(await codes('?code=tn-')).toEqual(['TN', 'TN', 'TN']);
    expect(await codes('?state=allocated')).toEqual([]);
    const monitor = await aMember(server, 'monitor', other.study, { siteIds: [other.sites[1]!.id] });
    expect(await codes('', monitor.client)).toEqual(['UP', 'UP']);
    expect(await codes(`?site=${other.sites[0]!.id}`, monitor.client)).toEqual([]);
    // proves CP-05
    expect(JSON.stringify(whole)).not.toContain('Canary');
  });

  it('is not there for those who see no participants, nor for strangers', async () => {
    const statistician = await aMember(server, 'statistician', running.study);
    const administrator = await aMember(server, 'administrator', null);
    for (const client of [statistician.client, administrator.client])
      expect((await client.get(path)).status).toBe(404);
    expect((await new Client(server).get(path)).status).toBe(401);
    expect((await coordinator.client.get(`${path}?sort=name`)).status).toBe(400);
    expect((await coordinator.client.get(`${path}?cursor=bm8`)).status).toBe(400);
    expect((await coordinator.client.get(`${path}?code=%25`)).status).toBe(400);
  });
});

describe('one participant', () => {
  // proves AC-02
  it('of another site or study answers as one that is not there', async () => {
    const participant = await enrol(running, running.sites[1]!);
    const elsewhere = await aMember(server, 'coordinator', running.study, {
      siteIds: [running.sites[0]!.id],
    });
    const foreign = await get(elsewhere.client, participant.id);
    const random = await get(elsewhere.client, randomUUID());
    const plain = ({ body }: Answer<unknown>) => ({ ...(body as object), requestId: null });
    expect(foreign.status).toBe(404);
    expect(plain(foreign)).toEqual(plain(random));
    expect((await elsewhere.client.get(`${path}/by-code/${participant.code}`)).status).toBe(404);
    const other = await aRunningStudy(server);
    expect((await other.coordinator.client.get(`${other.path}/participants/${participant.id}`)).status).toBe(
      404,
    );
  });

  it('is not looked for under a code that cannot be', async () => {
    const { code } = await enrol(running, running.sites[1]!);
    const slip = `${code.slice(0, 3)}${code.slice(4, 6)}${code[3]}${code.slice(6)}`;
    const answer = await coordinator.client.get<{ detail: string }>(`${path}/by-code/${slip}`);
    expect(slip === code || answer.status === 400).toBe(true);
    expect(answer.body.detail ?? '').not.toContain(slip);
  });
});

describe('consent, eligibility and withdrawal', () => {
  const inAct = (work: Parameters<typeof act>[2]) =>
    acting(server.orm, theSystem, () =>
      act(
        server.orm.em,
        {
          kind: 'consent-recorded',
          subject: { type: 'participant', id: randomUUID() },
          studyId: running.study.id,
        },
        work,
      ),
    );

  // proves CP-01
  it('lets nothing be taken before consent, and records date and version', async () => {
    const participant = await enrol(running, running.sites[0]!);
    await expect(inAct((tx) => assertConsented(tx, participant.id))).rejects.toMatchObject({
      status: 409,
      detail: /Record the consent first/,
    });
    await expect(
      inAct((tx) => recordConsent(tx, participant.id, { date: tomorrow, version: '1' })),
    ).rejects.toMatchObject({ status: 409 });
    await expect(
      inAct((tx) => recordConsent(tx, participant.id, { date: today, version: ' ' })),
    ).rejects.toMatchObject({ status: 409 });
    await consent(server, running.study, participant);
    expect((await get(coordinator.client, participant.id)).body).toMatchObject({
      state: 'consented',
      consentedOn: today,
      consentVersion: 'consent 1.0',
    });
    await inAct((tx) => assertConsented(tx, participant.id));
    const [, recorded] = await newestEvents(server, running.study.id, 2);
    expect(recorded).toMatchObject({
      kind: 'consent-recorded',
      values: { 'participant/consentVersion': 'consent 1.0' },
    });
  });

  it('confirms eligibility after consent, once the revision seen is the present one', async () => {
    const participant = await enrol(running, running.sites[0]!);
    const url = `${path}/${participant.id}/eligibility`;
    const body = { criteriaMet: true, checkedOn: today };
    const put = (client: Client, ifMatch?: number, sent: object = body) =>
      client.put<ParticipantDto>(url, sent, ifMatch ? { ifMatch } : {});
    await refused(() => put(coordinator.client, 1), 409, 'state-forbids');
    await consent(server, running.study, participant);
    const { revision } = (await get(coordinator.client, participant.id)).body;
    await refused(() => put(new Client(server), revision), 401);
    await refused(() => put(coordinator.client), 428, 'revision-missing');
    await refused(() => put(coordinator.client, revision - 1), 412, 'stale-revision');
    await refused(() => put(coordinator.client, revision, { ...body, criteriaMet: false }), 422);
    await refused(() => put(coordinator.client, revision, { ...body, checkedOn: tomorrow }), 422);
    await refused(() => put(running.investigator.client, revision), 403, 'not-allowed');
    const elsewhere = await aMember(server, 'coordinator', running.study, {
      siteIds: [running.sites[1]!.id],
    });
    await refused(() => put(elsewhere.client, revision), 404);
    const answer = await put(coordinator.client, revision);
    expect(answer).toMatchObject({ status: 200, body: { eligibleOn: today, state: 'consented' } });
    expect(await newestEvents(server, running.study.id)).toMatchObject([
      {
        kind: 'eligibility-confirmed',
        participant_id: participant.id,
        values: { 'participant/eligibleOn': today },
      },
    ]);
  });

  it('ends as planned once consented, and not after a withdrawal', async () => {
    const participant = await enrol(running, running.sites[0]!);
    await expect(inAct((tx) => recordCompletion(tx, participant.id))).rejects.toMatchObject({ status: 409 });
    await consent(server, running.study, participant);
    await inAct((tx) => recordCompletion(tx, participant.id));
    const done = (await get(coordinator.client, participant.id)).body;
    expect(done.state).toBe('completed');
    const body = { reason: 'own wish', withdrawnOn: today, earlierData: 'kept', safetyFollowUp: false };
    const later = await coordinator.client.post(`${path}/${participant.id}/withdrawal`, body, {
      ifMatch: done.revision,
    });
    expect(later.status).toBe(200);
    await expect(inAct((tx) => recordCompletion(tx, participant.id))).rejects.toMatchObject({ status: 409 });
  });

  // proves CP-03
  it('stops collection at once on withdrawal, as the participant chose', async () => {
    const participant = await eligible(server, running, running.sites[0]!);
    const url = `${path}/${participant.id}/withdrawal`;
    const body = { reason: 'moves away', withdrawnOn: today, earlierData: 'left-out', safetyFollowUp: true };
    const send = (client: Client, sent: object = body, ifMatch = participant.revision) =>
      client.post<ParticipantDto>(url, sent, { ifMatch });
    await refused(() => send(coordinator.client, { ...body, reason: ' ' }), 422);
    await refused(() => send(coordinator.client, { ...body, earlierData: undefined }), 422);
    await refused(() => send(coordinator.client, { ...body, withdrawnOn: '2001-01-01' }), 422);
    await refused(() => send(coordinator.client, body, 1), 412);
    await refused(() => send(running.technician.client), 403);
    const answer = await send(coordinator.client);
    expect(answer).toMatchObject({
      status: 200,
      body: { state: 'withdrawn', withdrawal: { on: today, earlierData: 'left-out', safetyFollowUp: true } },
    });
    expect(await newestEvents(server, running.study.id)).toMatchObject([
      {
        kind: 'participant-withdrawn',
        reason: 'moves away',
        values: { 'participant/earlierData': 'left-out' },
      },
    ]);
    await refused(() => send(coordinator.client, body, answer.body.revision), 409);
    await expect(inAct((tx) => assertConsented(tx, participant.id))).rejects.toMatchObject({ status: 409 });
    await inAct((tx) => assertConsented(tx, participant.id, { safetyFollowUp: true }));
    await expect(
      inAct((tx) => recordConsent(tx, participant.id, { date: today, version: '2' })),
    ).rejects.toMatchObject({ status: 409 });
  });
});

/** Whether the number has a code at all that this person could have been given. */
function parseableWithSomeCheck(start: string, person: { name: string; birthDate: string }): boolean {
  return [...'23456789ABCDEFGHJKLMNPQRSTUVWXYZ'].some((check) => {
    const parsed = parseParticipantCode(start + check);
    return parsed !== null && whatCodeTells(parsed.code, person) === null;
  });
}
