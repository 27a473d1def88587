import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type {
  DifferenceDto,
  DraftDto,
  InstrumentDto,
  LibraryInstrumentDto,
  VerdictDto,
  VersionDto,
  VersionSummaryDto,
} from '#schemas/api/instruments.ts';
import { canonicalHash } from '#backend/database/trail/canonical.ts';
import type { InstrumentSchema, SampleEntry } from '#schemas/instruments/instrument.ts';
import { Client } from '#tests/support/client.ts';
import { startTestServer, type TestServer } from '#tests/support/server.ts';
import { aMember, aStudy, type Member } from '#tests/support/setup-builders.ts';
import { eventCount, newestEvents } from '#tests/support/trail.ts';

let server: TestServer;
let studyId: string;
let investigator: Member;
let coordinator: Member;

beforeAll(async () => {
  server = await startTestServer();
  const { study } = await aStudy(server, { code: 'marsh' });
  studyId = study.id;
  investigator = await aMember(server, 'principal-investigator', study);
  coordinator = await aMember(server, 'coordinator', study);
});
afterAll(() => server.stop());

const base = '/studies/marsh';

/** A small instrument; `order` of its fields is not the alphabet's. */
const instrument = (key: string, more: Partial<InstrumentSchema> = {}): InstrumentSchema => ({
  $schema: 'https://json-schema.org/draft/2020-12/schema',
  instrumentKey: key,
  title: 'Trial',
  type: 'object',
  additionalProperties: false,
  required: ['pulse'],
  properties: {
    systolicPressure: {
      type: 'number',
      title: 'Systolic pressure',
      unit: 'mm[Hg]',
      minimum: 40,
      maximum: 300,
    },
    pulse: { type: 'number', title: 'Pulse', unit: '/min' },
    arm: { type: 'string', title: 'Arm', enum: ['left', 'right'] },
  },
  ...more,
});
const sample: SampleEntry = { name: 'ordinary', values: { '/pulse': 60 }, expect: { outcome: 'passes' } };

const written = (schema: object): string => JSON.stringify(schema, null, 2);

async function draftOf(key: string): Promise<DraftDto> {
  const begun = await investigator.client.post<DraftDto>(`${base}/instrument-drafts`, {
    from: 'blank',
    key,
    title: key,
  });
  expect(begun.status).toBe(201);
  return begun.body;
}

async function saved(
  draft: DraftDto,
  schema: object | string,
  samples: SampleEntry[] = [sample],
): Promise<DraftDto> {
  const text = typeof schema === 'string' ? schema : written(schema);
  const answer = await investigator.client.put<DraftDto>(
    `${base}/instrument-drafts/${draft.id}`,
    { text, samples },
    { ifMatch: draft.revision },
  );
  expect(answer.status).toBe(200);
  return answer.body;
}

const publish = (draft: DraftDto, reason = 'first version') =>
  investigator.client.post<VersionDto>(
    `${base}/instrument-drafts/${draft.id}/publication`,
    { reason },
    { ifMatch: draft.revision },
  );

async function published(
  key: string,
  schema = instrument(key),
): Promise<{ draft: DraftDto; version: VersionDto }> {
  const draft = await saved(await draftOf(key), schema);
  const answer = await publish(draft);
  expect(answer.body).toMatchObject({ key, version: 1 });
  const after = await investigator.client.get<DraftDto>(`${base}/instrument-drafts/${draft.id}`);
  return { draft: after.body, version: answer.body };
}

describe('a draft', () => {
  it('is begun from the library with its samples, which all come out as expected', async () => {
    const library = await investigator.client.get<LibraryInstrumentDto[]>(`${base}/instrument-library`);
    const pressures = library.body.find(({ key }) => key === 'resting-pressures');
    expect(pressures?.fields).toBeGreaterThan(5);
    const begun = await investigator.client.post<DraftDto>(`${base}/instrument-drafts`, {
      from: 'library',
      key: 'resting-pressures',
    });
    expect(begun).toMatchObject({ status: 201, body: { baseVersion: null, changed: true, revision: 1 } });
    const { text, samples, id } = begun.body;
    const verdict = await investigator.client.post<VerdictDto>(`${base}/instrument-drafts/${id}/check`, {
      text,
      samples,
    });
    expect(verdict.body).toMatchObject({ publishable: true, differences: [] });
    expect(verdict.body.samples.length).toBeGreaterThan(0);
    expect(verdict.body.samples.every(({ passed }) => passed)).toBe(true);
    expect((await newestEvents(server, studyId))[0]).toMatchObject({
      kind: 'instrument-drafted',
      subject: `instrument-draft/${id}`,
      actor_id: investigator.personId,
      values: { 'instrument-draft/key': 'resting-pressures' },
    });
    const again = await investigator.client.post(`${base}/instrument-drafts`, {
      from: 'library',
      key: 'resting-pressures',
    });
    expect(again).toMatchObject({ status: 409, body: { slug: 'already-exists' } });
    const nowhere = await investigator.client.post(`${base}/instrument-drafts`, {
      from: 'library',
      key: 'no-such-thing',
    });
    expect(nowhere.status).toBe(404);
  });

  it('keeps text that is no JSON, and answers where it stops being one', async () => {
    const draft = await draftOf('broken');
    const text = '{\n  "title": "Half",\n  "type": \n}';
    const kept = await saved(draft, text);
    expect((await investigator.client.get<DraftDto>(`${base}/instrument-drafts/${draft.id}`)).body.text).toBe(
      text,
    );
    expect(kept.title).toBe('broken');
    const verdict = await investigator.client.post<VerdictDto>(
      `${base}/instrument-drafts/${draft.id}/check`,
      {
        text,
        samples: [],
      },
    );
    expect(verdict.body).toMatchObject({ publishable: false, validatorHash: null });
    expect(verdict.body.problems).toMatchObject([
      { severity: 'error', line: 4, column: 1, from: text.length - 1 },
    ]);
  });

  // proves IV-05 IV-06 IV-07 IV-09
  it('is judged with each problem at its place in the text', async () => {
    const { id } = await draftOf('judged');
    const check = async (schema: object) => {
      const text = written(schema);
      const { body } = await investigator.client.post<VerdictDto>(`${base}/instrument-drafts/${id}/check`, {
        text,
        samples: [],
      });
      return body.problems.map(({ from, to, severity, message }) => ({
        at: text.slice(from, to),
        severity,
        message,
      }));
    };
    const field = (more: object) =>
      instrument('judged', { properties: { pulse: { type: 'number', title: 'Pulse', ...more } } as never });
    expect(await check(instrument('judged', { requierd: ['pulse'] } as never))).toEqual([
      { at: '"requierd"', severity: 'error', message: 'requierd is not a keyword: did you mean required?' },
    ]);
    expect((await check(field({ unit: 'mmHg' })))[0]).toMatchObject({ at: '"unit"', severity: 'error' });
    expect((await check(field({ derive: 'pulse +' })))[0]).toMatchObject({ severity: 'error' });
    const unknownWord = await check(
      instrument('judged', {
        properties: {
          pulse: { type: 'number', title: 'Pulse', unit: '1' },
          half: { type: 'number', title: 'Half', unit: '1', derive: 'pusle / 2.0' },
        },
      }),
    );
    expect(unknownWord[0]).toMatchObject({ at: 'pusle', severity: 'error' });
    expect((await check(instrument('judged', { $ref: 'https://example.test/x' })))[0]).toMatchObject({
      severity: 'error',
    });
    expect(await check(instrument('another-key'))).toMatchObject([{ at: '"instrumentKey"' }]);
    const loose = {
      ...instrument('judged'),
      properties: { pulse: { type: 'string', title: 'Code', pattern: '[0-9]{3}' } },
    };
    expect(await check(loose)).toMatchObject([{ at: '"pattern"', severity: 'warning' }]);
  });

  it('is saved by who saw the newest revision, and only by the investigator of this study', async () => {
    const draft = await draftOf('guarded');
    const address = `${base}/instrument-drafts/${draft.id}`;
    const body = { text: 'x', samples: [] };
    const before = await eventCount(server, studyId);
    expect((await investigator.client.put(address, body)).status).toBe(428);
    expect((await investigator.client.put(address, body, { ifMatch: 7 })).status).toBe(412);
    expect((await new Client(server).put(address, body, { ifMatch: 1 })).status).toBe(401);
    expect((await coordinator.client.put(address, body, { ifMatch: 1 })).status).toBe(403);
    expect((await coordinator.client.get(address)).status).toBe(404);
    expect(
      (await coordinator.client.post(`${base}/instrument-drafts`, { from: 'blank', key: 'x', title: 'X' }))
        .status,
    ).toBe(403);
    expect((await investigator.client.put(address, { ...body, hash: 'x' }, { ifMatch: 1 })).status).toBe(422);
    const other = await aStudy(server);
    const stranger = await aMember(server, 'principal-investigator', other.study);
    const foreign = `/studies/${other.study.code}/instrument-drafts/${draft.id}`;
    expect((await stranger.client.get(foreign)).status).toBe(404);
    expect((await stranger.client.put(foreign, body, { ifMatch: 1 })).status).toBe(404);
    expect((await stranger.client.get(address)).status).toBe(404);
    expect(await eventCount(server, studyId)).toBe(before);
    expect((await investigator.client.get<DraftDto>(address)).body.revision).toBe(1);
  });

  it('is discarded with a reason: back to its version, or off the table', async () => {
    const fresh = await draftOf('discarded');
    const discard = (draft: DraftDto) =>
      investigator.client.post<DraftDto>(
        `${base}/instrument-drafts/${draft.id}/discarding`,
        { reason: 'not needed after all' },
        { ifMatch: draft.revision },
      );
    expect((await discard(fresh)).status).toBe(200);
    const keys = async () =>
      (await investigator.client.get<InstrumentDto[]>(`${base}/instruments`)).body.map(({ key }) => key);
    expect(await keys()).not.toContain('discarded');
    await draftOf('discarded');
    expect(await keys()).toContain('discarded');

    const { draft, version } = await published('kept');
    const changed = await saved(draft, instrument('kept', { title: 'Changed' }));
    expect(changed.changed).toBe(true);
    const back = await discard(changed);
    expect(back.body).toMatchObject({ changed: false, text: `${written(version.schema)}\n` });
    expect((await discard(back.body)).status).toBe(409);
    expect((await newestEvents(server, studyId))[0]).toMatchObject({ reason: 'not needed after all' });
  });
});

describe('publication', () => {
  // proves IV-01
  it('makes a version with author, time, reason and hash, in the order the fields were written', async () => {
    const { version, draft } = await published('whole');
    expect(version).toMatchObject({
      version: 1,
      title: 'Trial',
      reason: 'first version',
      authorName: investigator.name,
      newest: true,
      hash: canonicalHash(instrument('whole')),
    });
    const read = await coordinator.client.get<VersionDto>(`${base}/instrument-versions/${version.id}`);
    expect(Object.keys(read.body.schema.properties)).toEqual(['systolicPressure', 'pulse', 'arm']);
    expect(read.body).toEqual(version);
    expect(draft).toMatchObject({ baseVersion: 1, changed: false });
    expect((await newestEvents(server, studyId))[0]).toMatchObject({
      kind: 'instrument-published',
      subject: `instrument-version/${version.id}`,
      reason: 'first version',
      values: { 'instrument-version/hash': version.hash, 'instrument-version/version': 1 },
    });
    expect((await publish(draft)).body).toMatchObject({ slug: 'state-forbids' });
  });

  // proves IV-01
  it('cannot be undone by any road', async () => {
    const { version } = await published('fixed');
    const address = `${base}/instrument-versions/${version.id}`;
    for (const method of ['PUT', 'PATCH', 'DELETE', 'POST']) {
      expect((await investigator.client.send(method, address, { body: { title: 'Other' } })).status).toBe(
        404,
      );
    }
    const asApplication = server.pool.query("update instrument_version set title = 'Other' where id = $1", [
      version.id,
    ]);
    await expect(asApplication).rejects.toThrow(/permission denied|append-only/);
    await expect(
      server.ownerSql('delete from instrument_version where id = $1', [version.id]),
    ).rejects.toThrow();
  });

  // proves IV-03
  it('waits until every sample comes out as its author said, and until there is one', async () => {
    const draft = await draftOf('tried');
    const failing: SampleEntry = {
      name: 'too low',
      values: { '/pulse': 60, '/systolicPressure': 10 },
      expect: { outcome: 'passes' },
    };
    const first = await saved(draft, instrument('tried'), [failing]);
    const refused = await publish(first);
    expect(refused).toMatchObject({
      status: 422,
      body: { slug: 'instrument-not-valid', errors: [{ pointer: '/samples/0' }] },
    });
    const second = await saved(first, instrument('tried'), []);
    expect((await publish(second)).body).toMatchObject({ errors: [{ pointer: '/samples' }] });
    const expected: SampleEntry = { ...failing, expect: { outcome: 'refused' } };
    const third = await saved(second, instrument('tried'), [expected, sample]);
    const version = await publish(third);
    expect(version.status).toBe(201);
    expect(version.body.samples).toEqual([expected, sample]);
  });

  it('is refused with problems, with a stale revision, without a reason, and to anybody else', async () => {
    const draft = await draftOf('refused');
    const broken = await saved(draft, instrument('refused', { required: ['nothing'] }));
    const before = await eventCount(server, studyId);
    expect(await publish(broken)).toMatchObject({
      status: 422,
      body: { errors: [{ pointer: '/required/0' }] },
    });
    const address = `${base}/instrument-drafts/${draft.id}/publication`;
    const body = { reason: 'because' };
    expect((await investigator.client.post(address, body, { ifMatch: 1 })).status).toBe(412);
    expect((await investigator.client.post(address, { reason: ' ' }, { ifMatch: 2 })).status).toBe(422);
    expect((await coordinator.client.post(address, body, { ifMatch: 2 })).status).toBe(403);
    expect((await new Client(server).post(address, body, { ifMatch: 2 })).status).toBe(401);
    expect(await eventCount(server, studyId)).toBe(before);
  });

  // proves WS-15
  it('has one winner when it is asked for twice at the same instant', async () => {
    const draft = await saved(await draftOf('raced'), instrument('raced'));
    const answers = await Promise.all([publish(draft), publish(draft), publish(draft)]);
    expect(answers.map(({ status }) => status).sort()).toEqual([201, 412, 412]);
  });

  // proves IV-06 IV-09
  it('keeps the units of published fields and the names of published versions', async () => {
    const { draft } = await published('units', instrument('units', { $id: 'urn:marsh:units:1' }));
    const { systolicPressure, ...rest } = instrument('units').properties;
    const kilopascal = { ...systolicPressure, unit: 'kPa' } as never;
    const moved = await saved(
      draft,
      instrument('units', { properties: { systolicPressure: kilopascal, ...rest } }),
    );
    expect(await publish(moved)).toMatchObject({
      status: 422,
      body: { errors: [{ pointer: '/properties/systolicPressure/unit' }] },
    });
    const shadow = await saved(moved, instrument('units', { $id: 'URN:marsh:units:1#', title: 'Shadow' }));
    expect(await publish(shadow)).toMatchObject({ status: 422, body: { errors: [{ pointer: '/$id' }] } });
  });
});

describe('versions', () => {
  // proves IV-01 IV-02
  it('are listed newest first, told apart in words, and each stays readable as it was', async () => {
    const { draft, version: first } = await published('series');
    const { pulse, ...rest } = instrument('series').properties;
    const changed = instrument('series', {
      title: 'Series two',
      properties: {
        ...rest,
        pulse: { ...pulse, title: 'Heart rate' },
        hand: { type: 'string', title: 'Hand' },
      },
    });
    const next = await saved(draft, changed);
    const check = await investigator.client.post<VerdictDto>(
      `${base}/instrument-drafts/${draft.id}/check`,
      next && {
        text: next.text,
        samples: next.samples,
      },
    );
    const second = (await publish(next, 'asked by the coordinators')).body;
    const list = await coordinator.client.get<VersionSummaryDto[]>(`${base}/instruments/series/versions`);
    expect(list.body.map(({ version, reason }) => [version, reason])).toEqual([
      [2, 'asked by the coordinators'],
      [1, 'first version'],
    ]);
    const differences = await coordinator.client.get<DifferenceDto[]>(
      `${base}/instrument-versions/${second.id}/differences/${first.id}`,
    );
    expect(differences.body.map(({ subject, aspect, kind }) => [subject, aspect, kind])).toEqual([
      ['The instrument', 'label', 'changed'],
      ['Heart rate', 'label', 'changed'],
      ['Hand', null, 'added'],
      ['The instrument', 'order of the fields', 'reordered'],
    ]);
    expect(check.body.differences).toEqual(differences.body);
    const old = await coordinator.client.get<VersionDto>(`${base}/instrument-versions/${first.id}`);
    expect(old.body).toMatchObject({ newest: false, title: 'Trial', schema: { title: 'Trial' } });
    const again = await investigator.client.post<DraftDto>(`${base}/instrument-drafts`, {
      from: 'version',
      versionId: first.id,
    });
    expect(again).toMatchObject({
      status: 201,
      body: { id: draft.id, baseVersion: 2, changed: true, title: 'Trial' },
    });
  });

  it('are for members of the study, drafts for the investigator', async () => {
    const { version } = await published('seen');
    await draftOf('unseen');
    const seenBy = async (member: Member) =>
      (await member.client.get<InstrumentDto[]>(`${base}/instruments`)).body;
    const coordinators = await seenBy(coordinator);
    expect(coordinators.map(({ key }) => key)).not.toContain('unseen');
    expect(coordinators.every(({ draft }) => draft === null)).toBe(true);
    expect((await seenBy(investigator)).find(({ key }) => key === 'unseen')).toMatchObject({
      newest: null,
      draft: { changed: true },
    });
    expect((await coordinator.client.get(`${base}/instrument-library`)).status).toBe(403);
    const other = await aStudy(server);
    const stranger = await aMember(server, 'monitor', other.study);
    const foreign = `/studies/${other.study.code}`;
    expect((await stranger.client.get(`${foreign}/instrument-versions/${version.id}`)).status).toBe(404);
    expect((await stranger.client.get(`${foreign}/instruments/seen/versions`)).status).toBe(404);
    expect((await stranger.client.get(`${foreign}/instruments`)).body).toEqual([]);
    expect((await new Client(server).get(`${base}/instruments`)).status).toBe(401);
    const administrator = await aMember(server, 'administrator', null);
    expect((await administrator.client.get(`${base}/instruments`)).status).toBe(404);
  });
});

describe('the browser’s validator', () => {
  it('is served as a script of our own, by hash and for good, to members alone', async () => {
    const { version, draft } = await published('scripted');
    const address = `${base}/instruments/validators/${version.hash}.js`;
    const script = await coordinator.client.get<string>(address);
    expect(script.status).toBe(200);
    expect(script.headers.get('Content-Type')).toMatch(/^text\/javascript/);
    expect(script.headers.get('Cache-Control')).toBe('private, max-age=31536000, immutable');
    expect(script.headers.get('X-Content-Type-Options')).toBe('nosniff');
    expect(String(script.body)).toMatch(/^export default \(require\)/);
    expect((await new Client(server).get(address)).status).toBe(401);
    const other = await aStudy(server);
    const stranger = await aMember(server, 'coordinator', other.study);
    expect(
      (await stranger.client.get(`/studies/${other.study.code}/instruments/validators/${version.hash}.js`))
        .status,
    ).toBe(404);
    expect((await coordinator.client.get(`${base}/instruments/validators/..%2F..%2Fx.js`)).status).toBe(404);

    const text = written(instrument('scripted', { title: 'Only drafted' }));
    const verdict = await investigator.client.post<VerdictDto>(
      `${base}/instrument-drafts/${draft.id}/check`,
      { text, samples: [] },
    );
    const preview = `${base}/instruments/validators/${verdict.body.validatorHash}.js`;
    expect((await investigator.client.get(preview)).status).toBe(200);
    expect((await coordinator.client.get(preview)).status).toBe(404);
  });
});

describe('a locked study', () => {
  // proves LK-01
  it('takes no draft and no version', async () => {
    const { study } = await aStudy(server);
    const own = await aMember(server, 'principal-investigator', study);
    const drafts = `/studies/${study.code}/instrument-drafts`;
    const { body } = await own.client.post<DraftDto>(drafts, { from: 'library', key: 'consent' });
    await server.ownerSql("update study set state = 'locked' where id = $1", [study.id]);
    const content = { text: body.text, samples: body.samples };
    const tries = [
      await own.client.post(drafts, { from: 'library', key: 'handgrip-doppler' }),
      await own.client.put(`${drafts}/${body.id}`, content, { ifMatch: 1 }),
      await own.client.post(`${drafts}/${body.id}/discarding`, { reason: 'late' }, { ifMatch: 1 }),
      await own.client.post(`${drafts}/${body.id}/publication`, { reason: 'late' }, { ifMatch: 1 }),
    ];
    for (const answer of tries) expect(answer).toMatchObject({ status: 409, body: { slug: 'study-locked' } });
  });
});
