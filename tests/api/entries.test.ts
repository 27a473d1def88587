import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { EntryDto, HistoryLineDto, LiveQuantityDto } from '#schemas/api/capture.ts';
import type { Protocol } from '#schemas/protocol/protocol.ts';
import { beginVisit, expectStatus, openEntry, publishLibrary, save } from '../support/capture-builders.ts';
import {
  consent,
  enrol,
  aProtocol,
  publishProtocol,
  setStudyState,
} from '../support/participants-builders.ts';
import { startTestServer, type TestServer } from '../support/server.ts';
import { aMember, aStudy, type Member } from '../support/setup-builders.ts';
import { eventCount, newestEvents } from '../support/trail.ts';

let server: TestServer;
let path: string;
let studyId: string;
let coordinator: Member;
let elsewhere: Member;
let technician: Member;
let monitor: Member;
let participant: Awaited<ReturnType<typeof enrol>>;
let visitId: string;
let entry: EntryDto;

/** A visit with an open step and one that would tell the arm. */
const protocol = (): Protocol =>
  aProtocol(['AA', 'BB'], {
    visitTypes: Array.from({ length: 40 }, (_, index) => ({
      key: `visit-${index}`,
      label: `Visit ${index}`,
      targetDay: 1 + index,
      windowBefore: 0,
      windowAfter: 7,
      period: 1,
      runSheet: [
        {
          key: 'pressures',
          label: 'Pressures',
          anchor: { kind: 'visit-start' },
          plannedMinute: 0,
          durationMinutes: 5,
          instrument: 'resting-pressures',
          performedBy: 'coordinator',
        },
        {
          key: 'blood',
          label: 'Blood sample',
          anchor: { kind: 'visit-start' },
          plannedMinute: 10,
          durationMinutes: 5,
          instrument: 'blood-sample',
          performedBy: 'unblinded-technician',
        },
      ],
      measures: [
        {
          key: 'map',
          timePoint: 'baseline',
          quantity: 'meanArterialPressure',
          from: [{ step: 'pressures', pointer: '/meanArterialPressure' }],
          combine: 'only',
        },
        {
          key: 'hct',
          timePoint: 'baseline',
          quantity: 'haematocrit',
          from: [{ step: 'blood', pointer: '/haematocrit' }],
          combine: 'only',
        },
      ],
    })),
  });

beforeAll(async () => {
  server = await startTestServer();
  const { study, sites } = await aStudy(server);
  studyId = study.id;
  path = `/studies/${study.code}`;
  const investigator = await aMember(server, 'principal-investigator', study);
  coordinator = await aMember(server, 'coordinator', study, { siteIds: [sites[0]!.id] });
  elsewhere = await aMember(server, 'coordinator', study, { siteIds: [sites[1]!.id] });
  technician = await aMember(server, 'unblinded-technician', study);
  monitor = await aMember(server, 'monitor', study);
  await publishProtocol(server, study, investigator.personId, protocol());
  await publishLibrary(server, study, investigator.personId, [
    'resting-pressures',
    'blood-sample',
    'consent',
  ]);
  expectStatus(await technician.client.post(`${path}/allocation`, { blockSizes: [2, 4], slotsPerSite: 12 }), 201);
  await setStudyState(server, study, 'running');
  participant = await enrol({ path, coordinator }, sites[0]!);
  await consent(server, study, participant);
});
afterAll(() => server.stop());

let visits = 0;
beforeEach(async () => {
  const sheet = await beginVisit(coordinator.client, path, participant, `visit-${visits++}`);
  visitId = sheet.visit.id;
  entry = await openEntry(coordinator.client, path, visitId, 'pressures');
});

const url = (id = entry.id): string => `${path}/entries/${id}`;
const read = async (member = coordinator, id = entry.id): Promise<EntryDto> =>
  (await member.client.get<EntryDto>(url(id))).body;

const wholeEntry = {
  '/arm': 'right',
  '/cuffSize': 'adult',
  '/device': 'cuff 3',
  '/posture': 'supine',
  '/minutesRested': 20,
  ...Object.fromEntries(
    [0, 1, 2].flatMap((i) => [
      [`/systolic/${i}`, 118 + i],
      [`/diastolic/${i}`, 76 + i],
      [`/heartRate/${i}`, 60],
    ]),
  ),
};

describe('saving an entry', () => {
  // proves AT-01, DE-07
  it('stores each reading with the digits as written, derives, and writes one event', async () => {
    const before = await eventCount(server, studyId);
    const saved = await coordinator.client.send<EntryDto>('PATCH', url(), {
      body: {
        operations: [
          { pointer: '/systolic/0', value: 118.5, written: '118.50' },
          { pointer: '/diastolic/0', value: 76 },
          { pointer: '/systolic/1', value: 120 },
          { pointer: '/diastolic/1', value: 78 },
        ],
      },
      ifMatch: entry.revision,
    });
    expect(saved.status).toBe(200);
    expect(saved.etag).toBe(`"${entry.revision + 1}"`);
    expect(saved.body.values['/systolic/0']).toEqual({ value: 118.5, written: '118.50', unit: 'mm[Hg]' });
    // The first reading is left out by the instrument's rule: 78 + (120 − 78)/3.
    expect(saved.body.derived['/meanArterialPressure']).toMatchObject({ value: 92, unit: 'mm[Hg]' });
    expect(await read()).toEqual({ ...saved.body });
    expect(await eventCount(server, studyId)).toBe(before + 1);
    const [event] = await newestEvents(server, studyId);
    expect(event).toMatchObject({
      kind: 'entry-saved',
      actor_id: coordinator.personId,
      participant_id: participant.id,
    });
    expect(event?.values['entry-value/systolic/0']).toBe(118.5);
  });

  // proves DE-02
  it('answers 428 without If-Match, 400 for a weak one, 412 with both values for a stale one', async () => {
    expect(
      (
        await coordinator.client.send('PATCH', url(), {
          body: { operations: [{ pointer: '/arm', value: 'left' }] },
        })
      ).status,
    ).toBe(428);
    const weak = await save(
      coordinator.client,
      path,
      entry,
      { '/arm': 'left' },
      { ifMatch: `W/"${entry.revision}"` },
    );
    expect(weak.status).toBe(400);
    const first = await save(coordinator.client, path, entry, { '/systolic/0': 118 });
    expectStatus(first, 200);
    const second = await save(coordinator.client, path, entry, { '/systolic/0': 131 });
    expect(second.status).toBe(412);
    expect(second.body).toMatchObject({
      slug: 'stale-revision',
      currentRevision: first.body.revision,
      changed: [{ address: '/systolic/0', by: coordinator.name, present: { value: 118 } }],
    });
    expect((await read()).values['/systolic/0']).toMatchObject({ value: 118 });
  });

  it('lets only one of two simultaneous saves of one revision through', async () => {
    const both = await Promise.all([
      save(coordinator.client, path, entry, { '/systolic/0': 118 }),
      save(coordinator.client, path, entry, { '/diastolic/0': 76 }),
    ]);
    expect(both.map(({ status }) => status).sort()).toEqual([200, 412]);
  });

  // proves DE-04
  it('counts a save sent three times once, and refuses the key for another body', async () => {
    const key = randomUUID();
    const answers = [];
    for (let n = 0; n < 3; n += 1)
      answers.push(await save(coordinator.client, path, entry, { '/systolic/0': 118 }, { key }));
    expect(answers.map(({ status }) => status)).toEqual([200, 200, 200]);
    expect((await read()).revision).toBe(entry.revision + 1);
    const other = await save(coordinator.client, path, entry, { '/systolic/0': 119 }, { key });
    expect(other.status).toBe(422);
    expect(other.body).toMatchObject({ slug: 'key-reused' });
  });

  // proves DE-05, AT-09
  it('refuses what a hard check forbids by itself, keeps the rest, and remembers the attempt', async () => {
    const saved = await save(coordinator.client, path, entry, {
      '/systolic/0': 70,
      '/diastolic/0': 90,
      '/arm': 'left',
    });
    expect(saved.status).toBe(200);
    expect(saved.body.values['/arm']).toEqual({ value: 'left' });
    expect(saved.body.values['/systolic/0']).toBeUndefined();
    expect(saved.body.refused.map(({ checkId }) => checkId)).toContain('systolic-above-diastolic');
    const history = (await coordinator.client.get<HistoryLineDto[]>(`${url()}/history`)).body;
    const attempt = history.find(({ address, outcome }) => address === '/systolic/0' && outcome !== null);
    expect(attempt).toMatchObject({
      value: { value: 70 },
      outcome: { checkId: 'systolic-above-diastolic', outcome: 'refused' },
    });
  });

  it('asks at a soft check, and stores the value once it comes with a reason', async () => {
    const asked = await save(coordinator.client, path, entry, { '/minutesRested': 2 });
    expect(asked.status).toBe(422);
    expect(asked.body).toMatchObject({
      slug: 'fields-refused',
      refused: [{ checkId: 'rested', severity: 'soft' }],
    });
    expect((await read()).revision).toBe(entry.revision);
    const confirmed = await save(
      coordinator.client,
      path,
      entry,
      { '/minutesRested': 2 },
      { confirmations: [{ checkId: 'rested', reason: 'alarm in the room' }] },
    );
    expect(confirmed.status).toBe(200);
    expect(confirmed.body.findings).toContainEqual(
      expect.objectContaining({ checkId: 'rested', confirmed: 'alarm in the room' }),
    );
  });

  it.each([
    ['an unknown field', { pointer: '/sistolic', value: 1 }, '/operations/0/value'],
    ['a number out of range', { pointer: '/systolic/0', value: 9999 }, '/operations/0/value'],
    ['a text where a number is', { pointer: '/systolic/0', value: '118,5' }, '/operations/0/value'],
    [
      'another number than was written',
      { pointer: '/systolic/0', value: 118, written: '181' },
      '/operations/0/written',
    ],
    ['a decimal comma', { pointer: '/systolic/0', value: 118.5, written: '118,5' }, '/operations/0/written'],
    ['a computed field', { pointer: '/meanArterialPressure', value: 90 }, '/operations/0/value'],
    [
      'a reason that is not on the list',
      { pointer: '/systolic/0', rejected: 'because' },
      '/operations/0/rejected',
    ],
    ['an empty text', { pointer: '/device', value: '' }, '/operations/0/value'],
    ['a choice that is none', { pointer: '/arm', value: 'middle' }, '/operations/0/value'],
    ['a member of the prototype', { pointer: '/__proto__', value: 1 }, '/operations/0/pointer'],
  ])('names field and remedy for %s, and changes nothing', async (_what, operation, pointer) => {
    const before = await eventCount(server);
    const answer = await coordinator.client.send('PATCH', url(), {
      body: { operations: [operation] },
      ifMatch: entry.revision,
    });
    expect(answer.status).toBe(422);
    expect(answer.headers.get('Content-Type')).toContain('application/problem+json');
    expect((answer.body['errors'] as { pointer: string }[])[0]?.pointer).toBe(pointer);
    expect(await eventCount(server)).toBe(before);
  });

  it('refuses 1e999, a body of ten megabytes, another content type and doubled fields', async () => {
    const raw = (body: string, type = 'application/json') =>
      fetch(`${server.url}/api/v1${url()}`, {
        method: 'PATCH',
        headers: {
          Origin: server.url,
          Cookie: coordinator.client.cookie ?? '',
          'Content-Type': type,
          'If-Match': `"${entry.revision}"`,
        },
        body,
      });
    expect((await raw('{"operations":[{"pointer":"/systolic/0","value":1e999}]}')).status).toBe(422);
    expect((await raw(JSON.stringify({ operations: [], x: 'a'.repeat(10_000_000) }))).status).toBe(413);
    expect((await raw('operations=1', 'application/x-www-form-urlencoded')).status).toBe(415);
    expect((await raw('{"operations":')).status).toBe(400);
    const twice = await coordinator.client.send('PATCH', url(), {
      body: {
        operations: [
          { pointer: '/arm', value: 'left' },
          { pointer: '/arm', value: 'right' },
        ],
      },
      ifMatch: entry.revision,
    });
    expect(twice.status).toBe(422);
    expect((await read()).revision).toBe(entry.revision);
  });

  // proves AC-02
  it('is 401 signed out, 404 for another site, 403 for who only reads', async () => {
    expect((await fetch(`${server.url}/api/v1${url()}`)).status).toBe(401);
    expect((await save(elsewhere.client, path, entry, { '/arm': 'left' })).status).toBe(404);
    expect((await elsewhere.client.get(url())).status).toBe(404);
    expect((await save(monitor.client, path, entry, { '/arm': 'left' })).status).toBe(403);
    expect((await save(technician.client, path, entry, { '/arm': 'left' })).status).toBe(403);
    expect((await coordinator.client.get(url(randomUUID()))).status).toBe(404);
  });
});

describe('completing and correcting', () => {
  // proves DE-06
  it('waits for required fields, or the reason why there is none', async () => {
    const early = await coordinator.client.post(`${url()}/completion`, {}, { ifMatch: entry.revision });
    expect(early.status).toBe(422);
    expect((early.body['errors'] as unknown[]).length).toBeGreaterThan(5);
    const saved = await save(coordinator.client, path, entry, wholeEntry);
    expectStatus(saved, 200);
    const done = await coordinator.client.post<EntryDto>(
      `${url()}/completion`,
      {},
      { ifMatch: saved.body.revision },
    );
    expectStatus(done, 200);
    expect(done.body.state).toBe('complete');
    const late = await save(coordinator.client, path, done.body, { '/arm': 'left' });
    expect(late.status).toBe(409);
  });

  // proves DE-01, AT-06, AT-07
  it('corrects with a reason only, keeps every earlier value legible, and names the rule of what follows', async () => {
    const saved = await save(coordinator.client, path, entry, wholeEntry);
    const done = await coordinator.client.post<EntryDto>(
      `${url()}/completion`,
      {},
      { ifMatch: saved.body.revision },
    );
    expectStatus(done, 200);
    const correct = (revision: number, value: number, reason?: string) =>
      coordinator.client.post<EntryDto>(
        `${url()}/corrections`,
        { operations: [{ pointer: '/systolic/2', value }], ...(reason === undefined ? {} : { reason }) },
        { ifMatch: revision },
      );
    expect((await correct(done.body.revision, 121)).status).toBe(422);
    expect((await correct(done.body.revision, 121, '  ')).status).toBe(422);
    const first = await correct(done.body.revision, 122, 'typed from the wrong line');
    expectStatus(first, 200);
    const second = await correct(first.body.revision, 124, 'read again from source');
    expectStatus(second, 200);
    const history = (await coordinator.client.get<HistoryLineDto[]>(`${url()}/history`)).body;
    const lines = history.filter(({ address }) => address === '/systolic/2');
    expect(lines.map(({ value, reason }) => [(value as { value: number }).value, reason])).toEqual([
      [120, null],
      [122, 'typed from the wrong line'],
      [124, 'read again from source'],
    ]);
    const derived = history.filter(({ address }) => address === '/meanArterialPressure').at(-1);
    expect(derived).toMatchObject({
      actor: 'System: derivation',
      derivation: { rule: 'meanArterialPressureOneThird', version: '1' },
    });
  });

  // proves DE-08
  it('voids with a reason, and has no route that deletes', async () => {
    const voided = await coordinator.client.post<EntryDto>(
      `${url()}/voiding`,
      { reason: 'wrong participant' },
      { ifMatch: entry.revision },
    );
    expectStatus(voided, 200);
    expect(voided.body.state).toBe('void');
    expect((await coordinator.client.delete(url())).status).toBe(404);
    expect((await read()).state).toBe('void');
  });
});

describe('what would tell the arm', () => {
  // proves RB-07, AC-03
  it('is hidden in its place from blinded members, in entry, history and live column alike', async () => {
    const blood = await openEntry(technician.client, path, visitId, 'blood');
    const saved = await save(technician.client, path, blood, {
      '/haematocritTubes/0': 0.44,
      '/haematocritTubes/1': 0.44,
      '/haemoglobin': 14.8,
    });
    expectStatus(saved, 200);
    expect(saved.body.derived['/haematocrit']).toMatchObject({ value: 0.44 });

    const seen = await read(coordinator, blood.id);
    expect(seen.values['/haematocritTubes/0']).toEqual({ hidden: true });
    expect(seen.derived['/haematocrit']).toEqual({ hidden: true });
    const history = await coordinator.client.get<HistoryLineDto[]>(`${url(blood.id)}/history`);
    expect(history.body.length).toBeGreaterThan(0);
    for (const line of history.body) expect(line.value).toEqual({ hidden: true });
    const live = await coordinator.client.get<LiveQuantityDto[]>(`${path}/visits/${visitId}/quantities`);
    expect(live.body.find(({ key }) => key === 'haematocrit')).toEqual({
      key: 'haematocrit',
      label: 'Haematocrit',
      timePoint: 'baseline',
      hidden: true,
    });
    expect(JSON.stringify([seen, history.body, live.body])).not.toMatch(/0\.44|14\.8/);

    const open = await technician.client.get<LiveQuantityDto[]>(`${path}/visits/${visitId}/quantities`);
    expect(open.body.find(({ key }) => key === 'haematocrit')).toMatchObject({ value: 0.44 });
  });

  it('is not written by who is blinded', async () => {
    const refused = await coordinator.client.post(`${path}/visits/${visitId}/entries`, { stepKey: 'blood' });
    expect(refused.status).toBe(403);
  });
});

describe('a locked study', () => {
  // proves LK-01
  it('takes no save, completion, correction or visit', async () => {
    await setStudyState(server, { id: studyId }, 'locked');
    try {
      const before = await eventCount(server, studyId);
      expect((await save(coordinator.client, path, entry, { '/arm': 'left' })).body).toMatchObject({
        slug: 'study-locked',
        status: 409,
      });
      const void_ = await coordinator.client.post(
        `${url()}/voiding`,
        { reason: 'after the lock' },
        { ifMatch: entry.revision },
      );
      expect(void_.status).toBe(409);
      expect(await eventCount(server, studyId)).toBe(before);
    } finally {
      await setStudyState(server, { id: studyId }, 'running');
    }
  });
});
