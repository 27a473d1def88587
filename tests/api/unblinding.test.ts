import { spawnSync } from 'node:child_process';
import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { EmergencyOpeningDto, ParticipantDto, UnblindingDto } from '#schemas/api/participants.ts';
import { verifyAllocation, type OpenedAllocation } from '#schemas/participants/verify-allocation.ts';
import { Client, type Answer } from '#tests/support/client.ts';
import {
  allocate,
  aRunningStudy,
  armCanaries,
  eligible,
  enrol,
  setStudyState,
  type RunningStudy,
} from '#tests/support/participants-builders.ts';
import { startTestServer, type TestServer } from '#tests/support/server.ts';
import { aMember, password, type Member } from '#tests/support/setup-builders.ts';
import { eventCount, newestEvents } from '#tests/support/trail.ts';

let server: TestServer;
let running: RunningStudy;
let physician: Member;
let monitor: Member;
let participant: ParticipantDto;
let other: ParticipantDto;

beforeAll(async () => {
  server = await startTestServer();
  running = await aRunningStudy(server);
  physician = await aMember(server, 'study-physician', running.study);
  monitor = await aMember(server, 'monitor', running.study);
  participant = await allocate(running, await eligible(server, running, running.sites[0]!));
  other = await allocate(running, await eligible(server, running, running.sites[1]!));
});
afterAll(() => server.stop());

async function refused(
  work: () => Promise<Answer<unknown>>,
  status: number,
  slug?: string,
  study = running.study,
) {
  const before = await eventCount(server, study.id);
  const answer = await work();
  expect(answer, JSON.stringify(answer.body)).toMatchObject({ status, ...(slug ? { body: { slug } } : {}) });
  // A wrong password is itself on record (ES-03); nothing else is.
  expect(await eventCount(server, study.id)).toBe(before + (slug === 'password-wrong' ? 1 : 0));
  expect(JSON.stringify(answer.body)).not.toMatch(new RegExp(armCanaries.join('|')));
}

const sequenceOf = async (participantId: string): Promise<string> => {
  const [row] = await server.ownerSql<{ sequence_key: string }>(
    'select sequence_key from allocation_slot where participant_id = $1',
    [participantId],
  );
  return row!.sequence_key;
};
const noticesTo = (email: string) =>
  server.ownerSql<{ params: { event: string } }>(
    "select params from mail_outbox where recipient = $1 and template in ('study-event', 'work-waiting')",
    [email],
  );

describe('opening one condition in an emergency', () => {
  const open = (
    client: Client,
    id = participant.id,
    body: object = { reason: 'found unresponsive', password },
  ) => client.post<EmergencyOpeningDto>(`${running.path}/participants/${id}/emergency-opening`, body);

  // proves RB-06
  it('shows it to the study physician alone, at once, and leaves who, when and why', async () => {
    const answer = await open(physician.client);
    const sequence = await sequenceOf(participant.id);
    const [first, second] =
      sequence === 'seq-alder' ? ['cond-alder', 'cond-birch'] : ['cond-birch', 'cond-alder'];
    expect(answer).toMatchObject({
      status: 200,
      body: {
        code: participant.code,
        sequence: { key: sequence },
        periods: [
          { period: 1, condition: { key: first } },
          { period: 2, condition: { key: second } },
        ],
      },
    });
    const [event] = await newestEvents(server, running.study.id);
    expect(event).toMatchObject({
      kind: 'allocation-opened',
      actor_id: physician.personId,
      participant_id: participant.id,
      reason: 'found unresponsive',
    });
    expect(JSON.stringify(event)).not.toMatch(new RegExp(armCanaries.join('|')));

    for (const { client } of [running.coordinator, running.investigator, monitor, physician]) {
      const seen = await client.get<ParticipantDto>(`${running.path}/participants/${participant.id}`);
      expect(seen.body.emergencyOpenings).toMatchObject([{ by: physician.name }]);
      expect(seen.body.allocation).toEqual({ assignedAt: participant.allocation!.assignedAt, hidden: true });
      const untouched = await client.get<ParticipantDto>(`${running.path}/participants/${other.id}`);
      expect(untouched.body.emergencyOpenings).toEqual([]);
    }
  });

  // proves EM-01
  it('tells investigator and monitor that it happened, without code, arm or reason', async () => {
    for (const { email } of [running.investigator, monitor]) {
      const notices = await noticesTo(email);
      expect(notices.map(({ params }) => params.event)).toEqual(['allocation-opened']);
      const text = JSON.stringify(notices);
      for (const canary of [...armCanaries, participant.code, participant.id, 'unresponsive'])
        expect(text).not.toContain(canary);
    }
    expect(await noticesTo(physician.email)).toEqual([]);
    expect(await noticesTo(running.coordinator.email)).toEqual([]);
  });

  it('is refused without reason or password, to everybody else, and where nothing is allocated', async () => {
    await refused(() => open(new Client(server)), 401);
    for (const { client } of [running.coordinator, running.investigator, running.technician, monitor]) {
      await refused(() => open(client), 403, 'not-allowed');
    }
    const statistician = await aMember(server, 'statistician', running.study);
    await refused(() => open(statistician.client), 404);
    const stranger = await aRunningStudy(server);
    const foreign = await aMember(server, 'study-physician', stranger.study);
    await refused(
      () =>
        foreign.client.post(`${stranger.path}/participants/${participant.id}/emergency-opening`, {
          reason: 'found',
          password,
        }),
      404,
    );
    await refused(() => open(physician.client, participant.id, { password }), 422);
    await refused(() => open(physician.client, participant.id, { reason: 'found unresponsive' }), 422);
    await refused(
      () => open(physician.client, participant.id, { reason: 'found unresponsive', password: 'not mine' }),
      403,
      'password-wrong',
    );
    const screened = await enrol(running, running.sites[0]!);
    await refused(() => open(physician.client, screened.id), 409, 'state-forbids');
  });

  it('does not wait for an unlocking', async () => {
    const late = await aRunningStudy(server);
    const one = await allocate(late, await eligible(server, late, late.sites[0]!));
    const onCall = await aMember(server, 'study-physician', late.study);
    await setStudyState(server, late.study, 'locked');
    const answer = await onCall.client.post(`${late.path}/participants/${one.id}/emergency-opening`, {
      reason: 'found unresponsive',
      password,
    });
    expect(answer.status).toBe(200);
  });
});

describe('unblinding the study', () => {
  let study: RunningStudy;
  let statistician: Member;
  let allocated: ParticipantDto;

  beforeAll(async () => {
    study = await aRunningStudy(server);
    statistician = await aMember(server, 'statistician', study.study);
    allocated = await allocate(study, await eligible(server, study, study.sites[0]!));
  });

  const get = (client: Client) => client.get<UnblindingDto>(`${study.path}/unblinding`);
  const ask = (client: Client, body: object = { reason: 'the plan is signed', password }) =>
    client.post<UnblindingDto>(`${study.path}/unblinding`, body);
  const confirm = (client: Client, ifMatch?: number, body: object = { password }) =>
    client.post<UnblindingDto>(`${study.path}/unblinding/confirmation`, body, ifMatch ? { ifMatch } : {});
  const not = (work: () => Promise<Answer<unknown>>, status: number, slug?: string) =>
    refused(work, status, slug, study.study);

  // proves RB-08 and AC-06
  it('waits for the lock', async () => {
    await not(() => ask(statistician.client), 409, 'state-forbids');
    await not(() => confirm(study.investigator.client, 1), 409, 'state-forbids');
    await not(() => statistician.client.get(`${study.path}/allocation/opened`), 409, 'state-forbids');
    expect((await get(study.investigator.client)).body).toEqual({
      studyState: 'running',
      request: null,
      confirmed: null,
    });
    await setStudyState(server, study.study, 'locked');
  });

  it('is asked for with reason and password by those who may, once', async () => {
    await not(() => ask(new Client(server)), 401);
    for (const { client } of [study.coordinator, study.technician]) await not(() => ask(client), 403);
    await not(() => ask(statistician.client, { password }), 422);
    await not(
      () => ask(statistician.client, { reason: 'the plan is signed', password: 'not mine' }),
      403,
      'password-wrong',
    );
    const answer = await ask(statistician.client);
    expect(answer).toMatchObject({
      status: 201,
      body: {
        studyState: 'locked',
        request: { by: statistician.name, byMe: true, reason: 'the plan is signed', revision: 1 },
        confirmed: null,
      },
    });
    expect(await newestEvents(server, study.study.id)).toMatchObject([
      { kind: 'unblinding-requested', actor_id: statistician.personId, reason: 'the plan is signed' },
    ]);
    expect(await noticesTo(study.investigator.email)).toMatchObject([{ params: { waiting: 'unblinding' } }]);
    await not(() => ask(study.investigator.client), 409, 'state-forbids');
    expect((await get(study.investigator.client)).body.request).toMatchObject({ byMe: false });
    expect((await get(study.coordinator.client)).status).toBe(404);
  });

  // proves RB-08 and AC-05
  it('takes the other hand: not the same person, not without password, revision or lock', async () => {
    await not(() => confirm(statistician.client, 1), 403, 'not-allowed');
    const both = await aMember(server, 'principal-investigator', study.study, {
      person: { id: statistician.personId, email: statistician.email, name: statistician.name },
    });
    await not(() => confirm(both.client, 1), 403, 'not-allowed');
    await not(() => confirm(study.coordinator.client, 1), 403);
    await not(() => confirm(study.investigator.client), 428);
    await not(() => confirm(study.investigator.client, 9), 412, 'stale-revision');
    await not(() => confirm(study.investigator.client, 1, {}), 422);
    await not(() => confirm(study.investigator.client, 1, { password: 'not mine' }), 403, 'password-wrong');
    const hidden = await study.coordinator.client.get<ParticipantDto>(
      `${study.path}/participants/${allocated.id}`,
    );
    expect(hidden.body.allocation).toMatchObject({ hidden: true });
    await setStudyState(server, study.study, 'running');
    await not(() => confirm(study.investigator.client, 1), 409, 'state-forbids');
    await setStudyState(server, study.study, 'locked');
    // What was asked for under the first lock does not hold under the second.
    await not(() => confirm(study.investigator.client, 1), 409, 'state-forbids');
    const anew = await ask(statistician.client, { reason: 'locked again after one correction', password });
    expect(anew).toMatchObject({
      status: 201,
      body: { request: { revision: 2, reason: 'locked again after one correction' } },
    });
  });

  it('by two people at once happens once; from then on all know, and nothing is changed any more', async () => {
    const second = await aMember(server, 'principal-investigator', study.study);
    const answers = await Promise.all([confirm(study.investigator.client, 2), confirm(second.client, 2)]);
    expect(answers.map(({ status }) => status).filter((status) => status === 200)).toHaveLength(1);
    const done = answers.find(({ status }) => status === 200)!;
    expect(done.body).toMatchObject({ studyState: 'unblinded', request: { by: statistician.name } });
    const [event] = await newestEvents(server, study.study.id);
    expect(event).toMatchObject({ kind: 'unblinding-confirmed', values: { 'study/state': 'unblinded' } });

    const sequence = await sequenceOf(allocated.id);
    for (const { client } of [study.coordinator, study.investigator, study.technician]) {
      const seen = await client.get<ParticipantDto>(`${study.path}/participants/${allocated.id}`);
      expect(seen.body.allocation).toMatchObject({ hidden: false, sequence: { key: sequence } });
    }
    await not(() => ask(study.investigator.client), 409);
    await not(
      () =>
        study.coordinator.client.post(
          `${study.path}/participants/${allocated.id}/withdrawal`,
          {
            reason: 'moves away',
            withdrawnOn: allocated.enrolledOn,
            earlierData: 'kept',
            safetyFollowUp: false,
          },
          { ifMatch: allocated.revision },
        ),
      409,
      'study-locked',
    );
    expect((await noticesTo(study.coordinator.email)).map(({ params }) => params.event)).toEqual([
      'unblinded',
    ]);
  });

  // proves RB-12 and RB-01
  it('opens the list: it is the one whose digest was public, and what its seed makes', async () => {
    const opened = await study.coordinator.client.get<OpenedAllocation>(`${study.path}/allocation/opened`);
    expect(opened.status).toBe(200);
    expect(opened.body).toMatchObject({ blockSizes: [2, 4], sequences: ['seq-alder', 'seq-birch'] });
    expect(opened.body.list).toHaveLength(24);
    const [published] = await server.ownerSql<{ value: string }>(
      `select v.value #>> '{}' as value from recorded_value v join audit_event e using (study_id, sequence)
        where e.study_id = $1 and e.kind = 'allocation-sealed' and v.address = '/commitment'`,
      [study.study.id],
    );
    expect(opened.body.commitment).toBe(published?.value);
    expect(await verifyAllocation(opened.body)).toEqual({ sealHolds: true, madeFromSeed: true });
    const used = await server.ownerSql<{ position: number; sequence_key: string }>(
      'select position, sequence_key from allocation_slot where participant_id = $1',
      [allocated.id],
    );
    expect(
      opened.body.list.find(({ stratum, position }) => stratum === 'TN' && position === used[0]!.position)
        ?.sequence,
    ).toBe(used[0]!.sequence_key);
    expect(JSON.stringify(opened.body)).not.toContain(allocated.code);

    // proves RB-12: an outsider's command, without server or database
    const folder = await mkdtemp(join(tmpdir(), 'vesselry-opened-'));
    try {
      const run = async (body: OpenedAllocation) => {
        const file = join(folder, 'opened.json');
        await writeFile(file, JSON.stringify(body));
        return spawnSync(process.execPath, ['--import', 'tsx', 'scripts/allocation-verify.ts', file], {
          encoding: 'utf8',
        });
      };
      expect(await run(opened.body)).toMatchObject({
        status: 0,
        stdout: expect.stringContaining('The list is the one that was sealed') as string,
      });
      const [first, ...rest] = opened.body.list;
      const changed = { ...first!, sequence: first!.sequence === 'seq-alder' ? 'seq-birch' : 'seq-alder' };
      expect(await run({ ...opened.body, list: [changed, ...rest] })).toMatchObject({ status: 1 });
    } finally {
      await rm(folder, { recursive: true, force: true });
    }
  });
});
