import { spawn } from 'node:child_process';
import { mkdtemp, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { act } from '#backend/database/act.ts';
import { eventHash } from '#backend/database/trail/event-form.ts';
import type { DumpedEvent, DumpedValue } from '#backend/database/trail/verify-chain.ts';
import { StudySchema } from '#backend/modules/studies/study.entity.ts';
import { acting, theSystem } from '../support/acting.ts';
import { beginVisit, expectStatus, openEntry, publishLibrary, save } from '../support/capture-builders.ts';
import {
  aProtocol,
  consent,
  enrol,
  publishProtocol,
  setStudyState,
} from '../support/participants-builders.ts';
import { startTestServer, type TestServer } from '../support/server.ts';
import { aMember, aStudy } from '../support/setup-builders.ts';

const root = fileURLToPath(new URL('../..', import.meta.url));
const mistyped = 'Wrenna Mistletoe asked for a rest';

let server: TestServer;
let folder: string;
let studyId: string;
let events: DumpedEvent[];
let revisions: string[];
let values: DumpedValue[];
let heads: string;

/** Runs a command of scripts/ as an outsider would, in a process of its own. */
function run(script: string, args: string[], env: NodeJS.ProcessEnv = process.env) {
  return new Promise<{ code: number | null; output: string }>((resolve, reject) => {
    const child = spawn(process.execPath, ['--import', 'tsx', `scripts/${script}`, ...args], {
      cwd: root,
      env,
    });
    let output = '';
    child.stdout.on('data', (chunk: Buffer) => (output += chunk.toString()));
    child.stderr.on('data', (chunk: Buffer) => (output += chunk.toString()));
    child.on('error', reject);
    child.on('close', (code) => resolve({ code, output }));
  });
}

async function dump(name: string) {
  const out = join(folder, name);
  const dumped = await run('audit-dump.ts', ['--out', out], {
    ...process.env,
    DATABASE_OWNER_URL: server.ownerUrl,
  });
  if (dumped.code !== 0) throw new Error(dumped.output);
  const lines = async (file: string) => (await readFile(join(out, file), 'utf8')).split('\n').filter(Boolean);
  const chain = await lines('chain.jsonl');
  return {
    events: chain
      .filter((line) => line.startsWith('{"event"'))
      .map((line) => (JSON.parse(line) as { event: DumpedEvent }).event),
    revisions: chain.filter((line) => line.startsWith('{"revision"')),
    values: (await lines('values.jsonl')).map((line) => (JSON.parse(line) as { value: DumpedValue }).value),
    heads: join(out, 'heads.jsonl'),
  };
}

const eventLine = (event: DumpedEvent): string => JSON.stringify({ event });
const valueLine = (value: DumpedValue): string => JSON.stringify({ value });

let checks = 0;
/** Verifies a dump of these lines against the heads that were printed before anybody touched it. */
async function verify(chainLines: string[], valueRows: DumpedValue[] | null = null, against = heads) {
  checks += 1;
  const chain = join(folder, `chain-${checks}.jsonl`);
  await writeFile(chain, chainLines.join('\n'));
  const args = ['--dump', chain, '--heads', against];
  if (valueRows !== null) {
    const file = join(folder, `values-${checks}.jsonl`);
    await writeFile(file, valueRows.map(valueLine).join('\n'));
    args.push('--values', file);
  }
  return run('audit-verify.ts', args);
}

const whole = (changed: DumpedEvent[]): string[] => [...changed.map(eventLine), ...revisions];
const own = (): DumpedEvent[] => events.filter(({ study }) => study === studyId);
const others = (): DumpedEvent[] => events.filter(({ study }) => study !== studyId);
const middle = (): DumpedEvent => own()[Math.floor(own().length / 2)]!;

/** The chain hashed afresh from first to last, as someone with the database in hand could. */
function rebuilt(chain: DumpedEvent[]): DumpedEvent[] {
  let previous = chain[0]!.previous;
  return chain.map(({ hash: _, ...form }, index) => {
    const next = { ...form, sequence: index + 1, previous };
    previous = eventHash(next);
    return { ...next, hash: previous };
  });
}

beforeAll(async () => {
  server = await startTestServer();
  folder = await mkdtemp(join(tmpdir(), 'vesselry-audit-'));
  const { study, sites } = await aStudy(server);
  studyId = study.id;
  const path = `/studies/${study.code}`;
  const investigator = await aMember(server, 'principal-investigator', study);
  const coordinator = await aMember(server, 'coordinator', study);
  await publishLibrary(server, study, investigator.personId, ['resting-pressures', 'consent']);
  const step = {
    key: 'pressures',
    label: 'Pressures',
    anchor: { kind: 'visit-start' as const },
    plannedMinute: 0,
    durationMinutes: 5,
    instrument: 'resting-pressures',
    performedBy: 'coordinator' as const,
  };
  const visitType = { key: 'only', label: 'Only', targetDay: 1, windowBefore: 0, windowAfter: 7, period: 1 };
  await publishProtocol(
    server,
    study,
    investigator.personId,
    aProtocol(['AA', 'BB'], { visitTypes: [{ ...visitType, runSheet: [step], measures: [] }] }),
  );
  const technician = await aMember(server, 'unblinded-technician', study);
  expectStatus(await technician.client.post(`${path}/allocation`, { blockSizes: [2], slotsPerSite: 4 }), 201);
  await setStudyState(server, study, 'running');
  const participant = await enrol({ path, coordinator }, sites[0]!);
  await consent(server, study, participant);
  const sheet = await beginVisit(coordinator.client, path, participant, 'only');
  let entry = await openEntry(coordinator.client, path, sheet.visit.id, 'pressures');
  for (const systolic of [118, 121, 119]) {
    const saved = await save(coordinator.client, path, entry, {
      '/systolic/0': systolic,
      '/diastolic/0': 76,
    });
    expectStatus(saved, 200);
    entry = saved.body;
  }
  await acting(server.orm, theSystem, () =>
    act(
      server.orm.em,
      { kind: 'study-changed', subject: { type: 'study', id: studyId }, studyId, reason: mistyped },
      async (tx) => {
        (await tx.findOneOrFail(StudySchema, studyId)).title = 'An invented study, titled again';
      },
    ),
  );
  ({ events, revisions, values, heads } = await dump('first'));
}, 240_000);

afterAll(async () => {
  await server.stop();
  await rm(folder, { recursive: true, force: true });
});

describe('the chain of the trail, followed without server or database', () => {
  // proves AT-10
  it('is whole as dumped, values and printed heads included', async () => {
    expect(own().length).toBeGreaterThan(12);
    expect(revisions.length).toBeGreaterThan(2);
    const answer = await verify(whole(events), values);
    expect(answer).toMatchObject({ code: 0 });
    expect(answer.output).toContain(`OK: ${events.length} events, ${values.length} values, 0 redacted`);
  });

  const byteFlipped = () =>
    events.map((event) =>
      event === middle() ? { ...event, at: event.at.replace(/\d(?=Z$)/, other) } : event,
    );
  const other = (digit: string): string => String((Number(digit) + 1) % 10);

  // proves AT-10
  it.each([
    ['one byte flipped in an event', byteFlipped, 'its hash does not fit'],
    ['a middle event dropped', () => events.filter((event) => event !== middle()), 'removed or inserted'],
    [
      'an event inserted',
      () => events.flatMap((event) => (event === middle() ? [event, { ...event }] : [event])),
      'removed or inserted',
    ],
    ['the last ten cut off', () => [...others(), ...own().slice(0, -10)], 'events were cut off'],
    [
      'the whole chain made anew without one event',
      () => [...others(), ...rebuilt(own().filter((event) => event !== middle()))],
      'events were cut off',
    ],
    [
      'the whole chain made anew, as long as it was',
      () => [
        ...others(),
        ...rebuilt(own().map((event) => (event === middle() ? { ...event, role: 'monitor' } : event))),
      ],
      'the chain was made anew',
    ],
  ])('betrays %s', async (_, changed, message) => {
    const { code, output } = await verify(changed().map(eventLine));
    expect(code, output).toBe(1);
    expect(output).toContain(message);
  });

  // proves AT-10
  it('betrays a value altered, a value removed and a revision altered', async () => {
    const reading = values.find(({ value }) => value === 121)!;
    const altered = await verify(
      whole(events),
      values.map((row) => (row === reading ? { ...row, value: 112 } : row)),
    );
    expect(altered.code).toBe(1);
    expect(altered.output).toContain('another value');

    const removed = await verify(
      whole(events),
      values.filter((row) => row !== reading),
    );
    expect(removed.code).toBe(1);
    expect(removed.output).toContain('that are not in the values’ file');

    const [first = '', ...rest] = revisions;
    const shifted = first.replace(
      /"contentHash":"(.)/,
      (_, digit: string) => `"contentHash":"${digit === '0' ? 1 : 0}`,
    );
    const revised = await verify([...events.map(eventLine), shifted, ...rest]);
    expect(revised.code).toBe(1);
    expect(revised.output).toContain('does not fit its hash');
  });

  it('says which line is damaged instead of guessing', async () => {
    const { code, output } = await verify([eventLine(events[0]!), '{"event": {"study"']);
    expect(code).toBe(2);
    expect(output).toContain('line 2: is not JSON');
  });
});

describe('a value redacted', () => {
  // proves AT-11
  it('leaves the chain whole and stands in the report, and its text in no table', async () => {
    const typed = values.find(({ value }) => value === mistyped)!;
    await server.ownerSql('select redact_value($1, $2)', [studyId, typed.id]);
    const after = await dump('redacted');
    const chain = [...after.events.map(eventLine), ...after.revisions];
    const { code, output } = await verify(chain, after.values);
    expect(code, output).toBe(0);
    expect(output).toContain('1 redacted');
    expect(output).toContain(`redacted  study ${studyId}, event ${typed.sequence}: ${typed.address}`);
    expect(JSON.stringify(after)).not.toContain('Mistletoe');
    const tables = await server.ownerSql<{ name: string }>(
      `select format('%I.%I', schemaname, tablename) as name from pg_tables
        where schemaname not in ('pg_catalog', 'information_schema')`,
    );
    for (const { name } of tables) {
      const found = await server.ownerSql(
        `select 1 from ${name} as row where row::text like '%Mistletoe%' limit 1`,
      );
      expect(found, name).toEqual([]);
    }
  });
});
