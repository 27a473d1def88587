import { execFile } from 'node:child_process';
import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { dirname, join } from 'node:path';
import { promisify } from 'node:util';
import { mkdir } from 'node:fs/promises';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { CutDto, PlanDto, PlanVersionDto, ProgressDto, RunDto } from '#schemas/api/analysis.ts';
import type { EntryDto, VisitDto } from '#schemas/api/capture.ts';
import type { ExportDto } from '#schemas/api/exports.ts';
import type { SignaturePreparationDto } from '#schemas/api/records.ts';
import type { Protocol, RunSheetStep } from '#schemas/protocol/protocol.ts';
import type { StudyResult } from '#analysis/study/run-study.ts';
import type { StudyPlan } from '#analysis/study/study-plan.ts';
import { beginVisit, expectStatus, openEntry, publishLibrary, save } from '../support/capture-builders.ts';
import {
  allocate,
  aProtocol,
  eligible,
  publishProtocol,
  setStudyState,
  type RunningStudy,
} from '../support/participants-builders.ts';
import { startTestServer, type TestServer } from '../support/server.ts';
import { aMember, aStudy, password, type Member } from '../support/setup-builders.ts';
import { unzipped } from '../support/unzip.ts';

/** Identifiers that must be found nowhere outside their store, and that people type where they should not. */
const canaries = ['Quillon Marshwiggle', '1987-06-05', '0155 500 7731', 'MRN-774-221', 'XQ7 9ZZ'];

const step = (key: string, minute: number, instrument: string): RunSheetStep => ({
  key,
  label: key,
  anchor: { kind: 'visit-start' },
  plannedMinute: minute,
  durationMinutes: 5,
  instrument,
  performedBy: instrument === 'blood-sample' ? 'unblinded-technician' : 'coordinator',
});

const protocol = (): Protocol =>
  aProtocol(['TN', 'UP'], {
    visitTypes: [1, 2].map((period) => ({
      key: `period-${period}`,
      label: `Period ${period}`,
      targetDay: period,
      windowBefore: 0,
      windowAfter: 7,
      period,
      runSheet: [
        step('pressures-1', 0, 'resting-pressures'),
        step('blood-1', 5, 'blood-sample'),
        step('flow-1', 10, 'forearm-plethysmography'),
        step('blood-2', 60, 'blood-sample'),
        step('pressures-2', 65, 'resting-pressures'),
        step('flow-2', 70, 'forearm-plethysmography'),
      ],
      measures: (['1', '2'] as const).flatMap(
        (n) =>
          [
            {
              key: `map-${n}`,
              timePoint: n === '1' ? 'baseline' : 'after',
              quantity: 'meanArterialPressure',
              from: [{ step: `pressures-${n}`, pointer: '/meanArterialPressure' }],
              combine: 'only',
            },
            {
              key: `flow-${n}`,
              timePoint: n === '1' ? 'baseline' : 'after',
              quantity: 'forearmBloodFlow',
              from: [{ step: `flow-${n}`, pointer: '/meanFlowRight' }],
              combine: 'only',
            },
            {
              key: `hct-${n}`,
              timePoint: n === '1' ? 'baseline' : 'after',
              quantity: 'haematocrit',
              from: [{ step: `blood-${n}`, pointer: '/haematocrit' }],
              combine: 'only',
            },
            {
              key: `plasma-${n}`,
              timePoint: n === '1' ? 'baseline' : 'after',
              quantity: 'plasmaViscosity',
              from: [{ step: `blood-${n}`, pointer: '/plasmaViscosity' }],
              combine: 'only',
            },
          ] as const,
      ),
    })),
  });

const plan: StudyPlan = {
  title: 'Alder against birch',
  estimand: 'Ratio of geometric means, after over baseline, alder over birch.',
  design: 'crossover-2x2',
  conditions: ['cond-alder', 'cond-birch'],
  flow: 'forearmBloodFlow',
  baselineTimePoint: 'baseline',
  timePoint: 'after',
  viscosity: { law: { law: 'quemada-cokelet', shearRate: 200 }, plasma: 'measured' },
  primary: 'resistance',
  secondary: ['viscosity', 'hindrance'],
  method: 'crossover_2x2',
  equivalence: { outcome: 'hindrance', lower: 0.8, upper: 1.25 },
  confidence: 0.95,
  multiplicity: 'holm',
  missingData: 'Complete participants.',
  sensitivityLaws: [{ law: 'pries-bulk' }, { law: 'pries-in-vitro', diameter: 100 }, { law: 'quemada-das' }],
  seed: 11,
};

let server: TestServer;
let running: RunningStudy;
let statistician: Member;
let monitor: Member;
const path = (): string => running.path;
const people = (): [coordinator: Member, technician: Member] => [running.coordinator, running.technician];

beforeAll(async () => {
  server = await startTestServer({ worker: true });
  const { study, sites } = await aStudy(server, { siteCodes: ['TN', 'UP'] });
  const investigator = await aMember(server, 'principal-investigator', study);
  running = {
    study,
    sites,
    path: `/studies/${study.code}`,
    investigator,
    coordinator: await aMember(server, 'coordinator', study),
    technician: await aMember(server, 'unblinded-technician', study),
  };
  statistician = await aMember(server, 'statistician', study);
  monitor = await aMember(server, 'monitor', study);
  await publishProtocol(server, study, investigator.personId, protocol());
  await publishLibrary(server, study, investigator.personId, [
    'resting-pressures',
    'blood-sample',
    'forearm-plethysmography',
  ]);
  expectStatus(
    await running.technician.client.post(`${path()}/allocation`, { blockSizes: [2], slotsPerSite: 8 }),
    201,
  );
  await setStudyState(server, study, 'running');
});
afterAll(() => server.stop());

/** Fills a step in and completes it. */
async function fill(
  member: Member,
  visitId: string,
  stepKey: string,
  values: Record<string, unknown>,
  soft: string[] = [],
): Promise<EntryDto> {
  const entry = await openEntry(member.client, path(), visitId, stepKey);
  const confirmations = soft.map((checkId) => ({ checkId, reason: 'as measured' }));
  const saved = await save(member.client, path(), entry, values, { confirmations });
  expectStatus(saved, 200);
  expect(saved.body.refused).toEqual([]);
  const done = await member.client.post<EntryDto>(
    `${path()}/entries/${entry.id}/completion`,
    {},
    { ifMatch: saved.body.revision },
  );
  expectStatus(done, 200);
  return done.body;
}

const readings = (pointer: string, values: number[]): Record<string, number> =>
  Object.fromEntries(values.map((value, index) => [`${pointer}/${index}`, value]));

async function runVisit(
  participant: { id: string },
  number: number,
  period: number,
  diluted: boolean,
): Promise<void> {
  const [coordinator, technician] = people();
  const sheet = await beginVisit(coordinator.client, path(), participant, `period-${period}`);
  const visitId = sheet.visit.id;
  for (const n of [1, 2]) {
    const after = diluted && n === 2;
    const wobble = Math.sin(number * 5 + period * 2 + n);
    const systolic = Math.round(120 + 4 * wobble - (after ? 2 : 0));
    await fill(coordinator, visitId, `pressures-${n}`, {
      '/arm': 'left',
      '/cuffSize': 'adult',
      '/device': canaries[3],
      '/posture': 'supine',
      '/minutesRested': 20,
      '/remarks': `${canaries[0]} called from ${canaries[2]}`,
      ...readings('/systolic', [systolic + 3, systolic, systolic]),
      ...readings('/diastolic', [78, 77, 77]),
      ...readings('/heartRate', [62, 61, 60]),
    });
    const haematocrit = Number(((after ? 0.44 : 0.52) + 0.004 * wobble).toFixed(3));
    await fill(technician, visitId, `blood-${n}`, {
      '/posture': 'supine',
      '/minutesInPosture': 25,
      '/tourniquetSeconds': 0,
      '/volumeDrawn': 10,
      '/timeDrawn': '09:05',
      '/haematocritMethod': 'analyser',
      ...readings('/haematocritTubes', [haematocrit, haematocrit]),
      '/haemoglobin': Number((haematocrit * 34).toFixed(1)),
      '/plasmaViscosity': Number(((after ? 1.25 : 1.3) + 0.01 * wobble).toFixed(3)),
      '/viscosityTemperature': 37,
      '/reader': canaries[4],
      '/remarks': `born ${canaries[1]}`,
    });
    const flow = (after ? 3 : 2.3) * Math.exp(0.06 * wobble);
    const block = [1.02, 0.98, 1, 1.01, 0.99, 1.03, 0.97, 1].map((k) => Number((flow * k).toFixed(2)));
    await fill(coordinator, visitId, `flow-${n}`, {
      '/calibratedAtThisGain': true,
      '/hyperaemia': false,
      '/infusedArm': 'none',
      '/circumferenceRight': 26,
      '/circumferenceLeft': 26,
      '/collectingCuff': 45,
      '/wristCuff': 220,
      '/wristCuffSeconds': 60,
      ...readings('/flowRight', block),
      ...readings('/flowLeft', block),
      '/reader': 'R2',
    });
  }
  const visit = (await coordinator.client.get<{ visit: VisitDto }>(`${path()}/visits/${visitId}`)).body.visit;
  expectStatus(
    await coordinator.client.post(`${path()}/visits/${visitId}/completion`, {}, { ifMatch: visit.revision }),
    200,
  );
}

async function finished(member: Member, jobKey: string): Promise<ProgressDto> {
  for (let tries = 0; tries < 300; tries += 1) {
    const { body } = await member.client.get<ProgressDto>(`${path()}/jobs/${jobKey}`);
    if (body.state === 'done' || body.state === 'failed') return body;
    await new Promise((resolve) => setTimeout(resolve, 100));
  }
  throw new Error('The job did not end.');
}

const runScript = promisify(execFile);
async function hasR(): Promise<boolean> {
  return runScript('Rscript', ['--version']).then(
    () => true,
    () => false,
  );
}

describe('the main job over HTTP', () => {
  let planVersion: PlanVersionDto;
  let result: StudyResult;
  let run: RunDto;

  it('captures eight participants in two periods, each step by who does it', async () => {
    for (let number = 0; number < 8; number += 1) {
      const site = running.sites[number % 2]!;
      const participant = await allocate(running, await eligible(server, running, site));
      const [slot] = await server.ownerSql<{ sequence_key: string }>(
        'select sequence_key from allocation_slot where participant_id = $1',
        [participant.id],
      );
      for (const period of [1, 2]) {
        const first = slot?.sequence_key === 'seq-alder' ? 1 : 2;
        await runVisit(participant, number, period, period === first);
      }
    }
    const visits = await running.coordinator.client.get<{ items: VisitDto[] }>(
      `${path()}/visits?state=completed&limit=100`,
    );
    expect(visits.body.items).toHaveLength(16);
  }, 240_000);

  // proves SR-01
  it('signs a plan before the lock, after a rehearsal that tells nothing', async () => {
    const { client } = statistician;
    const draft = await client.post<PlanDto>(`${path()}/plans`, {
      name: 'Primary',
      content: { ...plan, method: 'paired_t' },
    });
    expectStatus(draft, 201);
    expect(draft.body.problems.map(({ pointer }) => pointer)).toEqual(['/method']);
    const early = await client.post(
      `${path()}/plans/${draft.body.id}/signature`,
      { password },
      { ifMatch: 1 },
    );
    expect(early.status).toBe(422);
    const saved = await client.put<PlanDto>(
      `${path()}/plans/${draft.body.id}`,
      { name: 'Primary', content: plan },
      { ifMatch: 1 },
    );
    expectStatus(saved, 200);

    const cut = await client.post<{ jobKey: string }>(`${path()}/cuts`, { kind: 'rehearsal' });
    expectStatus(cut, 202);
    expect((await finished(statistician, cut.body.jobKey)).state).toBe('done');
    const [rehearsal] = (await client.get<CutDto[]>(`${path()}/cuts`)).body;
    expect(rehearsal).toMatchObject({ kind: 'rehearsal', number: 1 });
    const tried = await client.post<RunDto>(`${path()}/runs`, {
      cutId: rehearsal?.id,
      planDraftId: draft.body.id,
    });
    expectStatus(tried, 202);
    expect((await finished(statistician, tried.body.id)).state).toBe('done');
    expect((await client.get<RunDto>(`${path()}/runs/${tried.body.id}`)).body.standing).toBe('rehearsal');

    const refused = await client.post(
      `${path()}/plans/${draft.body.id}/signature`,
      { password: 'not the password at all' },
      { ifMatch: saved.body.revision },
    );
    expect(refused.status).toBe(403);
    const signed = await client.post<PlanVersionDto>(
      `${path()}/plans/${draft.body.id}/signature`,
      { password },
      { ifMatch: saved.body.revision },
    );
    expectStatus(signed, 201);
    expect(signed.body.studyStateThen).toBe('running');
    planVersion = signed.body;
    expect((await client.post(`${path()}/cuts`, { kind: 'final' })).status).toBe(409);
  });

  // proves ES-01, ES-06, ES-09, LK-02
  it('signs every visit, and locks only with each open point named', async () => {
    const { client } = running.investigator;
    const visits = (await client.get<{ items: VisitDto[] }>(`${path()}/visits?limit=100`)).body.items;
    for (const visit of visits) {
      const prepared = (
        await client.get<SignaturePreparationDto>(`${path()}/visits/${visit.id}/signature-preparation`)
      ).body;
      expect(prepared.withoutUnblindingValues).toBe(true);
      const { contentHash, preparation } = prepared;
      const signed = await client.post(`${path()}/visits/${visit.id}/signatures`, {
        contentHash,
        preparation,
        password,
      });
      expectStatus(signed, 201);
      const again = await client.post(`${path()}/visits/${visit.id}/signatures`, {
        contentHash,
        preparation,
        password,
      });
      expect(again.status).toBe(409);
    }
    const bare = await client.post(`${path()}/lock`, { reason: 'data complete', password, overrides: [] });
    expect(bare.status).toBe(409);
    expect((bare.body['errors'] as { pointer: string }[]).map(({ pointer }) => pointer)).toEqual([
      '/overrides/unverified-fields',
    ]);
    const locked = await client.post(`${path()}/lock`, {
      reason: 'data complete',
      password,
      overrides: [{ kind: 'unverified-fields', reason: 'no source in this test' }],
    });
    expectStatus(locked, 201);
  }, 120_000);

  // proves RB-08
  it('unblinds by two people, makes the same cut twice, and runs the signed plan', async () => {
    const asked = await statistician.client.post(`${path()}/unblinding`, {
      reason: 'plan signed, data locked',
      password,
    });
    expect(asked.status).toBeLessThan(300);
    const pending = await running.investigator.client.get<{
      revision?: number;
      unblinding?: { revision: number };
    }>(`${path()}/unblinding`);
    const confirmed = await running.investigator.client.post(
      `${path()}/unblinding/confirmation`,
      { password },
      { ifMatch: pending.body.revision ?? pending.body.unblinding?.revision ?? 1 },
    );
    expect(confirmed.status, JSON.stringify(confirmed.body)).toBeLessThan(300);

    for (let n = 0; n < 2; n += 1) {
      const cut = await statistician.client.post<{ jobKey: string }>(`${path()}/cuts`, { kind: 'final' });
      expectStatus(cut, 202);
      expect((await finished(statistician, cut.body.jobKey)).state).toBe('done');
    }
    const [second, first] = (await statistician.client.get<CutDto[]>(`${path()}/cuts`)).body;
    // proves LK-05
    expect(second?.sha256).toBe(first?.sha256);

    const hashes = [];
    for (const cut of [first, second]) {
      const asked = await statistician.client.post<RunDto>(`${path()}/runs`, {
        cutId: cut?.id,
        planVersionId: planVersion.id,
      });
      expectStatus(asked, 202);
      expect((await finished(statistician, asked.body.id)).state).toBe('done');
      run = (await statistician.client.get<RunDto>(`${path()}/runs/${asked.body.id}`)).body;
      hashes.push(run.resultSha256);
    }
    expect(hashes[0]).toBe(hashes[1]);
    expect(run).toMatchObject({ standing: 'planned', state: 'done', failure: null });
    result = (await statistician.client.get<StudyResult>(`${path()}/runs/${run.id}/result`)).body;
    expect(result.flow).toEqual({ allocated: 8, analysed: 8 });
    expect(result.effects[0]!.ratio).toBeLessThan(0.85);
    expect(result.sentence.map(({ text }) => text).join('')).toContain('Alder blend: forearm vascular resistance');
  }, 120_000);

  // proves DX-01, DX-02, DX-13, DX-14, AC-05
  it('exports what was approved, once, without an identifier, and R gives the same numbers', async () => {
    const { client } = statistician;
    const requested = await client.post<ExportDto>(`${path()}/exports`, {
      runId: run.id,
      purpose: 'a second statistician re-runs it',
    });
    expectStatus(requested, 201);
    const { id, revision, reportHash, report } = requested.body;
    expect(report.participants).toBe(8);
    const decision = { decision: 'approve', reason: 'report read', password, reportHash };
    expect(
      (await client.post(`${path()}/exports/${id}/decision`, decision, { ifMatch: revision })).status,
    ).toBe(403);
    const other = await running.investigator.client.post(
      `${path()}/exports/${id}/decision`,
      { ...decision, reportHash: 'a'.repeat(64) },
      { ifMatch: revision },
    );
    expect(other.status).toBe(412);
    expectStatus(
      await running.investigator.client.post(`${path()}/exports/${id}/decision`, decision, {
        ifMatch: revision,
      }),
      200,
    );
    expect((await finished(statistician, id)).state).toBe('done');

    const take = (member: Member): Promise<Response> =>
      fetch(`${server.url}/api/v1${path()}/exports/${id}/download`, {
        method: 'POST',
        headers: {
          Origin: server.url,
          'Content-Type': 'application/json',
          Cookie: member.client.cookie ?? '',
        },
        body: '{}',
      });
    expect((await take(running.investigator)).status).toBe(403);
    const downloads = await Promise.all([take(statistician), take(statistician)]);
    expect(downloads.map(({ status }) => status).sort()).toEqual([200, 409]);
    const zip = Buffer.from(await downloads.find(({ status }) => status === 200)!.arrayBuffer());
    const files = unzipped(zip);
    expect([...files.keys()]).toEqual(
      expect.arrayContaining([
        'analysis.csv',
        'analysis.R',
        'expected.csv',
        'manifest.json',
        'dictionary.csv',
        'README.md',
      ]),
    );

    const everything = [...files].map(([name, text]) => name + text).join('\n');
    for (const canary of canaries) expect(everything, canary).not.toContain(canary);
    const codes = await server.ownerSql<{ code: string; id: string }>('select code, id from participant');
    for (const { code, id: participantId } of codes) {
      expect(everything).not.toContain(code);
      expect(everything).not.toContain(participantId);
    }
    expect(everything.replace(files.get('manifest.json') ?? '', '')).not.toMatch(/20\d\d-[01]\d-[0-3]\d/);

    if (!(await hasR())) {
      console.info('R is not installed here: the exported script was not run.');
      return;
    }
    const folder = await mkdtemp(join(tmpdir(), 'vesselry-bundle-'));
    try {
      for (const [name, text] of files) {
        await mkdir(dirname(join(folder, name)), { recursive: true });
        await writeFile(join(folder, name), text);
      }
      const { stdout } = await runScript('Rscript', ['analysis.R'], { cwd: folder });
      expect(stdout).toContain('All numbers agree');
      await writeFile(
        join(folder, 'analysis.csv'),
        (files.get('analysis.csv') ?? '').replace(/\d\.\d/, '9.9'),
      );
      await expect(runScript('Rscript', ['analysis.R'], { cwd: folder })).rejects.toThrow(
        'changed since the export',
      );
    } finally {
      await rm(folder, { recursive: true, force: true });
    }
  }, 120_000);

  // proves AT-11 in part: what was typed by mistake lies in one place only
  it('keeps what people typed out of logs, mails, jobs and addresses', async () => {
    const jobs = await server.ownerSql<{ data: unknown }>(
      'select data from job.job union all select data from job.archive',
    );
    const mails = await server.mails();
    const events = await server.ownerSql('select * from audit_event');
    const text = JSON.stringify([jobs, mails, events]);
    for (const canary of canaries) expect(text, canary).not.toContain(canary);
  });

  it('lets the monitor read the whole trail and find the chain sound', async () => {
    const check = await monitor.client.get<{ ok: boolean; events: number }>(`${path()}/audit-events/check`);
    expect(check.body).toMatchObject({ ok: true });
    expect(check.body.events).toBeGreaterThan(300);
  });
});
