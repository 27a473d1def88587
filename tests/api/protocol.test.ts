import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type {
  EnrolmentDto,
  ProtocolDifferenceDto,
  ProtocolDraftDto,
  ProtocolVerdictDto,
  ProtocolVersionDto,
  ProtocolVersionSummaryDto,
} from '#schemas/api/protocol.ts';
import { libraryInstruments } from '#schemas/instruments/library/index.ts';
import { reedgrip } from '#schemas/protocol/demo/reedgrip.ts';
import type { Protocol } from '#schemas/protocol/protocol.ts';
import { publishDraft, startDraft } from '#backend/modules/instruments/index.ts';
import { acting, someone } from '#tests/support/acting.ts';
import { Client } from '#tests/support/client.ts';
import { startTestServer, type TestServer } from '#tests/support/server.ts';
import { aMember, aStudy, type Member } from '#tests/support/setup-builders.ts';
import { eventCount, newestEvents } from '#tests/support/trail.ts';

let server: TestServer;
let studyId: string;
let investigator: Member;
let coordinator: Member;

const base = '/studies/reed';

/** The invented study of the demo, at a site of this test's study. */
const protocol: Protocol = { ...reedgrip, sites: ['site-aa'] };
const used = new Set([
  ...protocol.visitTypes.flatMap(({ runSheet }) => runSheet.flatMap(({ instrument }) => instrument ?? [])),
  ...protocol.participantLogs.map(({ instrument }) => instrument),
]);

beforeAll(async () => {
  server = await startTestServer();
  const { study } = await aStudy(server, { code: 'reed', siteCodes: ['AA'] });
  studyId = study.id;
  investigator = await aMember(server, 'principal-investigator', study);
  coordinator = await aMember(server, 'coordinator', study);
});
afterAll(() => server.stop());

/** Publishes the library's instruments that the protocol fills in. */
async function withInstruments(inStudy: string, author: Member): Promise<void> {
  const facts = {
    role: 'principal-investigator',
    studyId: inStudy,
    siteIds: null,
    unblinded: false,
  } as const;
  const actor = someone({ ...facts, personId: author.personId });
  for (const { key } of libraryInstruments.filter((instrument) => used.has(instrument.key))) {
    const draft = await acting(server.orm, actor, () => startDraft(server.orm.em, { from: 'library', key }));
    const reason = { reason: 'as in the library' };
    await acting(server.orm, actor, () => publishDraft(server.orm.em, draft.id, draft.revision, reason));
  }
}

const draftPath = `${base}/protocol-draft`;
const written = (content: object): string => JSON.stringify(content, null, 2);
const readDraft = async () => (await investigator.client.get<ProtocolDraftDto>(draftPath)).body;

async function save(content: object | string): Promise<ProtocolDraftDto> {
  const { revision } = await readDraft();
  const text = typeof content === 'string' ? content : written(content);
  const answer = await investigator.client.put<ProtocolDraftDto>(draftPath, { text }, { ifMatch: revision });
  expect(answer.status).toBe(200);
  return answer.body;
}

const publish = async (reason = 'first version') =>
  investigator.client.post<ProtocolVersionDto>(
    `${draftPath}/publication`,
    { reason },
    { ifMatch: (await readDraft()).revision },
  );

const check = async (content: object | string) => {
  const text = typeof content === 'string' ? content : written(content);
  const { body } = await investigator.client.post<ProtocolVerdictDto>(`${draftPath}/check`, { text });
  return {
    ...body,
    places: body.problems.map(({ from, to, message }) => `${text.slice(from, to)} ${message}`),
  };
};

// The tests of this file follow a study from its first draft to its first amendment: each stands on the one before.
describe('the protocol of a new study', () => {
  it('begins blank, once, by the investigator', async () => {
    expect(await investigator.client.get(draftPath)).toMatchObject({ status: 200, body: null });
    expect((await coordinator.client.post(draftPath, { from: 'blank' })).status).toBe(403);
    expect((await new Client(server).post(draftPath, { from: 'blank' })).status).toBe(401);
    expect((await investigator.client.post(draftPath, { from: 'newest' })).status).toBe(409);
    const begun = await investigator.client.post<ProtocolDraftDto>(draftPath, { from: 'blank' });
    expect(begun).toMatchObject({ status: 201, body: { baseVersion: null, changed: false, revision: 1 } });
    expect((await newestEvents(server, studyId))[0]).toMatchObject({
      kind: 'protocol-drafted',
      actor_id: investigator.personId,
    });
    expect((await coordinator.client.get(draftPath)).status).toBe(404);
  });

  // proves AC-06
  it('opens nothing for enrolment before protocol, instruments and sites are there', async () => {
    const { body } = await investigator.client.get<EnrolmentDto>(`${base}/enrolment`);
    expect(body).toMatchObject({
      state: 'setting-up',
      openPoints: ['No instrument is published yet.', 'No protocol is published yet.'],
    });
    const opened = await investigator.client.post(
      `${base}/enrolment`,
      { reason: 'now' },
      { ifMatch: body.revision },
    );
    expect(opened).toMatchObject({ status: 409, body: { errors: [{}, {}] } });
  });

  it('is judged with each problem at its place', async () => {
    expect((await check('{"title": }')).places).toEqual(['} This is not JSON: a value is expected here']);
    expect((await check({ ...protocol, colour: 'red' })).places).toEqual([
      '"colour" colour is no part of a protocol; remove it',
    ]);
    const missing = await check({ ...protocol, sites: ['elsewhere'] });
    expect(missing.places).toContain('"elsewhere" The study has no site elsewhere; it has site-aa');
    expect(missing.places.some((place) => place.includes('There is no published instrument consent'))).toBe(
      true,
    );
    expect(missing).toMatchObject({ publishable: false, content: null });
    await withInstruments(studyId, investigator);
    expect(await check(protocol)).toMatchObject({ publishable: true, problems: [], differences: [] });
  });

  it('keeps what is typed for who saw the newest revision', async () => {
    const { revision } = await readDraft();
    const body = { text: 'not yet JSON' };
    const before = await eventCount(server, studyId);
    expect((await investigator.client.put(draftPath, body)).status).toBe(428);
    expect((await investigator.client.put(draftPath, body, { ifMatch: revision + 1 })).status).toBe(412);
    expect((await coordinator.client.put(draftPath, body, { ifMatch: revision })).status).toBe(403);
    expect(
      (await investigator.client.put(draftPath, { ...body, id: 'x' }, { ifMatch: revision })).status,
    ).toBe(422);
    expect(await eventCount(server, studyId)).toBe(before);
    expect(await save(body.text)).toMatchObject({ text: body.text, changed: true, revision: revision + 1 });
    expect((await investigator.client.post(draftPath, { from: 'blank' })).status).toBe(409);
    expect(await publish()).toMatchObject({ status: 422, body: { slug: 'protocol-not-valid' } });
  });

  // proves IV-01
  it('is published with author, reason and hash, and tells the study how many participants are planned', async () => {
    await save(protocol);
    const before = await eventCount(server, studyId);
    const address = `${draftPath}/publication`;
    const { revision } = await readDraft();
    expect(
      (await coordinator.client.post(address, { reason: 'because' }, { ifMatch: revision })).status,
    ).toBe(403);
    expect((await investigator.client.post(address, { reason: 'because' }, { ifMatch: 1 })).status).toBe(412);
    expect((await investigator.client.post(address, {}, { ifMatch: revision })).status).toBe(422);
    expect(await eventCount(server, studyId)).toBe(before);
    const version = await publish();
    expect(version).toMatchObject({
      status: 201,
      body: {
        version: 1,
        newest: true,
        reason: 'first version',
        authorName: investigator.name,
        title: protocol.title,
      },
    });
    expect(version.body.hash).toMatch(/^[0-9a-f]{64}$/);
    expect(new Set(version.body.instruments.map(({ key }) => key))).toEqual(used);
    expect((await newestEvents(server, studyId))[0]).toMatchObject({
      kind: 'protocol-published',
      subject: `protocol-version/${version.body.id}`,
      reason: 'first version',
      values: { 'protocol-version/hash': version.body.hash, 'study/plannedParticipants': 10 },
    });
    expect((await publish()).status).toBe(409);
    expect(await readDraft()).toMatchObject({ baseVersion: 1, changed: false });
    await expect(
      server.pool.query("update protocol_version set reason = 'other' where id = $1", [version.body.id]),
    ).rejects.toThrow(/permission denied|append-only/);
    for (const method of ['PUT', 'PATCH', 'DELETE']) {
      const change = await investigator.client.send(method, `${base}/protocol-versions/${version.body.id}`, {
        body: {},
      });
      expect(change.status).toBe(404);
    }
  });

  // proves AC-06
  it('opens the study for enrolment once, by the investigator, with a reason', async () => {
    const address = `${base}/enrolment`;
    const { body } = await coordinator.client.get<EnrolmentDto>(address);
    expect(body.openPoints).toEqual([]);
    const reason = { reason: 'all is approved' };
    expect((await coordinator.client.post(address, reason, { ifMatch: body.revision })).status).toBe(403);
    expect((await investigator.client.post(address, reason)).status).toBe(428);
    expect((await investigator.client.post(address, reason, { ifMatch: 99 })).status).toBe(412);
    const opened = await investigator.client.post<EnrolmentDto>(address, reason, { ifMatch: body.revision });
    expect(opened).toMatchObject({ status: 200, body: { state: 'running' } });
    expect((await newestEvents(server, studyId))[0]).toMatchObject({
      kind: 'enrolment-started',
      reason: 'all is approved',
      values: { 'study/state': 'running' },
    });
    const again = await investigator.client.post(address, reason, { ifMatch: opened.body.revision });
    expect(again.status).toBe(409);
  });
});

describe('an amendment', () => {
  // proves IV-01
  it('begins from the newest version, is told in sentences, and leaves the old version as it was', async () => {
    const begun = await investigator.client.post<ProtocolDraftDto>(draftPath, { from: 'newest' });
    expect(begun).toMatchObject({ status: 201, body: { baseVersion: 1, changed: false } });
    const content = JSON.parse(begun.body.text) as Protocol;
    const amended = {
      ...content,
      plannedParticipants: 12,
      allocation: { ...content.allocation, blockSizes: [4] },
    };
    const verdict = await check(amended);
    expect(verdict.differences.map(({ sentence }) => sentence)).toEqual([
      expect.stringContaining('lanned participants changed from 10 to 12'),
      expect.stringContaining('block sizes'),
    ]);
    await save(amended);
    const second = (await publish('more people are needed')).body;
    const list = await coordinator.client.get<ProtocolVersionSummaryDto[]>(`${base}/protocol-versions`);
    expect(list.body.map(({ version, reason }) => [version, reason])).toEqual([
      [2, 'more people are needed'],
      [1, 'first version'],
    ]);
    const [, first] = list.body;
    const old = await coordinator.client.get<ProtocolVersionDto>(`${base}/protocol-versions/${first!.id}`);
    expect(old.body).toMatchObject({ newest: false, content: { plannedParticipants: 10 } });
    const address = `${base}/protocol-versions/${second.id}/differences/${first!.id}`;
    const differences = await investigator.client.get<ProtocolDifferenceDto[]>(address);
    expect(differences.body).toEqual(verdict.differences);
  });

  // proves RB-01
  it('tells nobody who enrols or assesses how large the blocks are', async () => {
    const [newest, first] = (
      await coordinator.client.get<ProtocolVersionSummaryDto[]>(`${base}/protocol-versions`)
    ).body;
    const monitor = await aMember(server, 'monitor', { id: studyId });
    for (const member of [coordinator, monitor]) {
      const read = await member.client.get<ProtocolVersionDto>(`${base}/protocol-versions/${newest!.id}`);
      expect(read.body.content.allocation.blockSizes).toBeNull();
      const address = `${base}/protocol-versions/${newest!.id}/differences/${first!.id}`;
      const differences = await member.client.get<ProtocolDifferenceDto[]>(address);
      expect(differences.body.map(({ sentence }) => sentence).join()).not.toMatch(/block/i);
    }
    const technician = await aMember(server, 'unblinded-technician', { id: studyId });
    const known = await technician.client.get<ProtocolVersionDto>(`${base}/protocol-versions/${newest!.id}`);
    expect(known.body.content.allocation.blockSizes).toEqual([4]);
  });

  it('is given up with a reason', async () => {
    await save('half an amendment');
    const { revision } = await readDraft();
    const discard = (ifMatch: number) =>
      investigator.client.post<ProtocolDraftDto>(
        `${draftPath}/discarding`,
        { reason: 'not agreed on' },
        { ifMatch },
      );
    const back = await discard(revision);
    expect(back).toMatchObject({ status: 200, body: { baseVersion: 2, changed: false } });
    expect((await discard(back.body.revision)).status).toBe(409);
    expect((await newestEvents(server, studyId))[0]).toMatchObject({ reason: 'not agreed on' });
  });
});

describe('the protocol of another study', () => {
  // proves AC-02
  it('is not there', async () => {
    const { study } = await aStudy(server);
    const stranger = await aMember(server, 'principal-investigator', study);
    const [version] = (await coordinator.client.get<ProtocolVersionSummaryDto[]>(`${base}/protocol-versions`))
      .body;
    expect(
      (await stranger.client.get(`/studies/${study.code}/protocol-versions/${version!.id}`)).status,
    ).toBe(404);
    expect((await stranger.client.get(`/studies/${study.code}/protocol-versions`)).body).toEqual([]);
    expect((await stranger.client.get(`${base}/protocol-versions`)).status).toBe(404);
    expect((await stranger.client.post(`${base}/enrolment`, { reason: 'now' }, { ifMatch: 1 })).status).toBe(
      404,
    );
    expect((await new Client(server).get(`${base}/protocol-versions`)).status).toBe(401);
  });
});

describe('a locked study', () => {
  // proves LK-01
  it('takes no draft, no version and no opening', async () => {
    await save({ ...protocol, plannedParticipants: 14 });
    const { revision } = await readDraft();
    await server.ownerSql("update study set state = 'locked' where id = $1", [studyId]);
    const tries = [
      await investigator.client.put(draftPath, { text: '' }, { ifMatch: revision }),
      await investigator.client.post(`${draftPath}/discarding`, { reason: 'late' }, { ifMatch: revision }),
      await investigator.client.post(`${draftPath}/publication`, { reason: 'late' }, { ifMatch: revision }),
      await investigator.client.post(draftPath, { from: 'newest' }),
    ];
    for (const answer of tries) expect(answer).toMatchObject({ status: 409, body: { slug: 'study-locked' } });
  });
});
