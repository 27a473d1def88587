import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { SiteDto, StudyDto } from '#schemas/api/studies.ts';
import { act } from '#backend/database/act.ts';
import { assertStudyOpen } from '#backend/modules/studies/index.ts';
import { acting, theSystem } from '#tests/support/acting.ts';
import { Client } from '#tests/support/client.ts';
import { startTestServer, type TestServer } from '#tests/support/server.ts';
import { aMember, aStudy, type Member } from '#tests/support/setup-builders.ts';
import { eventCount, newestEvents } from '#tests/support/trail.ts';

let server: TestServer;
let administrator: Member;
let coordinator: Member;
let fen: Awaited<ReturnType<typeof aStudy>>;

beforeAll(async () => {
  server = await startTestServer();
  fen = await aStudy(server, { code: 'fen' });
  administrator = await aMember(server, 'administrator', null);
  coordinator = await aMember(server, 'coordinator', fen.study);
});
afterAll(() => server.stop());

const newStudy = { code: 'heath', name: 'HEATH', title: 'An invented study of heather' };

describe('a study', () => {
  it('is made by the administrator, begins its own chain, and is read back with its sites', async () => {
    const made = await administrator.client.post<StudyDto>('/administration/studies', newStudy);
    expect(made).toMatchObject({ status: 201, body: { ...newStudy, state: 'setting-up', sites: [] } });
    const [event] = await newestEvents(server, made.body.id);
    expect(event).toMatchObject({
      kind: 'study-created',
      actor_id: administrator.personId,
      values: { 'study/code': 'heath', 'study/state': 'setting-up' },
    });
    const site = { code: 'TN', name: 'Tarn Nook', timeZone: 'America/La_Paz' };
    const added = await administrator.client.post<SiteDto>(
      `/administration/studies/${made.body.id}/sites`,
      site,
    );
    expect(added).toMatchObject({ status: 201, body: site });
    expect((await newestEvents(server, made.body.id))[0]).toMatchObject({
      kind: 'site-added',
      site_id: added.body.id,
      values: { 'site/timeZone': 'America/La_Paz' },
    });
    const read = await administrator.client.get<StudyDto>(`/administration/studies/${made.body.id}`);
    expect(read.body.sites).toEqual([added.body]);
  });

  it('is refused when its code is taken, or the body is not one', async () => {
    const before = await eventCount(server);
    const post = (body: object) => administrator.client.post('/administration/studies', body);
    expect(await post({ ...newStudy, code: 'fen' })).toMatchObject({
      status: 409,
      body: { slug: 'already-exists', errors: [{ pointer: '/code' }] },
    });
    expect((await post({ ...newStudy, code: 'Not Lower' })).status).toBe(422);
    expect((await post({ ...newStudy, code: 'moor', state: 'running' })).status).toBe(422);
    expect((await new Client(server).post('/administration/studies', newStudy)).status).toBe(401);
    expect((await coordinator.client.post('/administration/studies', newStudy)).status).toBe(403);
    expect((await coordinator.client.get('/administration/studies')).status).toBe(403);
    expect(await eventCount(server)).toBe(before);
  });

  it('is renamed with a reason, by who saw the newest revision', async () => {
    const address = `/administration/studies/${fen.study.id}`;
    const body = { name: 'FEN', title: 'A better title', reason: 'the ethics committee asked' };
    const seen = await administrator.client.get<StudyDto>(address);
    expect((await administrator.client.put(address, body)).status).toBe(428);
    expect((await administrator.client.put(address, body, { ifMatch: 77 })).status).toBe(412);
    expect((await coordinator.client.put(address, body, { ifMatch: seen.etag! })).status).toBe(403);
    const changed = await administrator.client.put<StudyDto>(address, body, { ifMatch: seen.etag! });
    expect(changed).toMatchObject({
      status: 200,
      body: { title: 'A better title', revision: seen.body.revision + 1 },
    });
    expect((await newestEvents(server, fen.study.id))[0]).toMatchObject({
      kind: 'study-changed',
      reason: body.reason,
      values: { 'study/title': 'A better title' },
    });
    const nowhere = await administrator.client.put(`/administration/studies/${crypto.randomUUID()}`, body, {
      ifMatch: 1,
    });
    expect(nowhere.status).toBe(404);
  });

  // proves AC-02
  it('is read by its members alone', async () => {
    const read = await coordinator.client.get<StudyDto>('/studies/fen');
    expect(read).toMatchObject({
      status: 200,
      body: { code: 'fen', sites: [{ code: 'AA' }, { code: 'BB' }] },
    });
    const other = await aStudy(server);
    const foreign = await coordinator.client.get(`/studies/${other.study.code}`);
    const unknown = await coordinator.client.get('/studies/no-such-study');
    expect([foreign.status, unknown.status]).toEqual([404, 404]);
    const { requestId: _a, ...foreignBody } = foreign.body;
    const { requestId: _b, ...unknownBody } = unknown.body;
    expect(foreignBody).toEqual(unknownBody);
  });

  it('is listed a page at a time', async () => {
    const codes: string[] = [];
    let cursor = '';
    do {
      const { body } = await administrator.client.get<{ items: StudyDto[]; nextCursor: string | null }>(
        `/administration/studies?limit=2${cursor}`,
      );
      codes.push(...body.items.map(({ code }) => code));
      cursor = body.nextCursor === null ? '' : `&cursor=${body.nextCursor}`;
    } while (cursor !== '');
    expect(codes).toEqual(codes.toSorted());
    expect(codes).toContain('fen');
  });
});

describe('a site', () => {
  const sites = () => `/administration/studies/${fen.study.id}/sites`;

  it('has a code of its own, a time zone of the zone data, and is changed with a reason', async () => {
    const added = await administrator.client.post<SiteDto>(sites(), {
      code: 'CC',
      name: 'Copse',
      timeZone: 'Europe/Oslo',
    });
    const post = (body: object) => administrator.client.post(sites(), body);
    expect((await post({ code: 'CC', name: 'Copse', timeZone: 'UTC' })).status).toBe(409);
    expect((await post({ code: 'dd', name: 'Dell', timeZone: 'UTC' })).status).toBe(422);
    for (const timeZone of ['Mars/Crater', '-04:00', '']) {
      expect((await post({ code: 'DD', name: 'Dell', timeZone })).status, timeZone).toBe(422);
    }
    const address = `/administration/sites/${added.body.id}`;
    const body = { name: 'Copse End', timeZone: 'Europe/Lisbon', reason: 'typed wrongly' };
    expect((await administrator.client.put(address, body, { ifMatch: 9 })).status).toBe(412);
    const changed = await administrator.client.put<SiteDto>(address, body, { ifMatch: added.etag! });
    expect(changed).toMatchObject({ status: 200, body: { name: 'Copse End', timeZone: 'Europe/Lisbon' } });
    await server.ownerSql("update study set state = 'running' where id = $1", [fen.study.id]);
    const moved = { ...body, timeZone: 'Europe/Oslo' };
    expect((await administrator.client.put(address, moved, { ifMatch: changed.etag! })).status).toBe(409);
    expect((await coordinator.client.put(address, body, { ifMatch: changed.etag! })).status).toBe(403);
    expect(
      (await coordinator.client.post(sites(), { code: 'EE', name: 'Elm', timeZone: 'UTC' })).status,
    ).toBe(403);
  });
});

describe('a locked study', () => {
  // proves LK-01
  it('takes no more changes of its set-up', async () => {
    const { study, sites } = await aStudy(server);
    await server.ownerSql("update study set state = 'locked' where id = $1", [study.id]);
    const before = await eventCount(server, study.id);
    const address = `/administration/studies/${study.id}`;
    const rename = await administrator.client.put(
      address,
      { name: 'X', title: 'X', reason: 'too late' },
      { ifMatch: 1 },
    );
    const add = await administrator.client.post(`${address}/sites`, {
      code: 'ZZ',
      name: 'Z',
      timeZone: 'UTC',
    });
    const change = await administrator.client.put(
      `/administration/sites/${sites[0]!.id}`,
      { name: 'Z', timeZone: 'Etc/UTC', reason: 'too late' },
      { ifMatch: 1 },
    );
    for (const answer of [rename, add, change])
      expect(answer).toMatchObject({ status: 409, body: { slug: 'study-locked' } });
    expect(await eventCount(server, study.id)).toBe(before);
  });

  // proves LK-04
  it('is locked only after the acts that found it open have ended', async () => {
    const { study } = await aStudy(server);
    const order: string[] = [];
    let release = (): void => undefined;
    const held = new Promise<void>((resolve) => (release = resolve));
    let opened = (): void => undefined;
    const begun = new Promise<void>((resolve) => (opened = resolve));
    const saving = acting(server.orm, { ...theSystem, studyId: study.id }, () =>
      act(server.orm.em, { kind: 'study-changed', subject: { type: 'study', id: study.id } }, async (tx) => {
        expect(await assertStudyOpen(tx)).toBe('setting-up');
        opened();
        await held;
        order.push('saved');
      }),
    );
    await begun;
    const locking = server
      .ownerSql("update study set state = 'locked' where id = $1", [study.id])
      .then(() => order.push('locked'));
    await new Promise((resolve) => setTimeout(resolve, 200));
    expect(order).toEqual([]);
    release();
    await Promise.all([saving, locking]);
    expect(order).toEqual(['saved', 'locked']);
  });
});
