import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { AllocationDto, ParticipantDto, WorklistItemDto } from '#schemas/api/participants.ts';
import { conditionOf } from '#backend/modules/participants/index.ts';
import { abilityFor } from '#schemas/abilities/ability.ts';
import type { Role } from '#schemas/vocabulary/roles.ts';
import { acting, someone, theSystem } from '#tests/support/acting.ts';
import { Client, type Answer } from '#tests/support/client.ts';
import {
  allocate,
  aProtocol,
  aRunningStudy,
  armCanaries,
  consent,
  eligible,
  enrol,
  publishProtocol,
  setStudyState,
  type RunningStudy,
} from '#tests/support/participants-builders.ts';
import { startTestServer, type TestServer } from '#tests/support/server.ts';
import { aMember, aStudy } from '#tests/support/setup-builders.ts';
import { newestEvents } from '#tests/support/trail.ts';

let server: TestServer;
let running: RunningStudy;

beforeAll(async () => {
  server = await startTestServer();
  running = await aRunningStudy(server);
});
afterAll(() => server.stop());

const today = new Date().toISOString().slice(0, 10);

async function refused(work: () => Promise<Answer<unknown>>, status: number, detail?: RegExp) {
  const count = () =>
    server.ownerSql<{ used: number; events: number }>(
      `select (select count(*)::int from allocation_slot where participant_id is not null) as used,
              (select count(*)::int from audit_event where kind <> 'signature-refused') as events`,
    );
  const before = await count();
  const answer = await work();
  expect(answer, JSON.stringify(answer.body)).toMatchObject({ status });
  if (detail) expect((answer.body as { detail: string }).detail).toMatch(detail);
  expect(await count()).toEqual(before);
  return answer.body as { errors?: { pointer: string }[] };
}

interface Slot {
  site_id: string;
  position: number;
  sequence_key: string;
  participant_id: string | null;
}
const slotsOf = (study: { id: string }) =>
  server.ownerSql<Slot>(
    'select site_id, position, sequence_key, participant_id from allocation_slot where study_id = $1 order by site_id, position',
    [study.id],
  );

describe('sealing the allocation list', () => {
  // proves RB-01
  it('shows a digest and a number of places, and nothing of seed, salt, block sizes or list', async () => {
    for (const { client } of [running.technician, running.coordinator, running.investigator]) {
      const answer = await client.get<AllocationDto>(`${running.path}/allocation`);
      expect(answer).toMatchObject({
        status: 200,
        body: { sequences: 2, assigned: 0, sealed: { slots: 24, sealedBy: running.technician.name } },
      });
      expect(answer.body.sealed?.commitment).toMatch(/^[0-9a-f]{64}$/);
      expect(Object.keys(answer.body.sealed!).sort()).toEqual([
        'commitment',
        'sealedAt',
        'sealedBy',
        'slots',
      ]);
    }
    const slots = await slotsOf(running.study);
    expect(slots).toHaveLength(24);
    for (const site of running.sites) {
      const own = slots.filter(({ site_id }) => site_id === site.id);
      expect(own.map(({ position }) => position)).toEqual([1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 11, 12]);
      expect(own.filter(({ sequence_key }) => sequence_key === 'seq-alder').length).toBeGreaterThanOrEqual(4);
      expect(own.filter(({ sequence_key }) => sequence_key === 'seq-alder').length).toBeLessThanOrEqual(8);
    }
    const [making] = await server.ownerSql<{ text: string }>(
      "select encode(sealed_making, 'escape') as text from allocation_list where study_id = $1",
      [running.study.id],
    );
    expect(making?.text).not.toMatch(/seed|blockSizes|seq-alder/);
    const sealed = await server.ownerSql<{ address: string; level: string }>(
      `select v.address, v.level from recorded_value v join audit_event e using (study_id, sequence)
        where e.study_id = $1 and e.kind = 'allocation-sealed' and v.address in ('/sequenceKey', '/position', '/sealedMaking')`,
      [running.study.id],
    );
    expect(new Set(sealed.map(({ address, level }) => `${address} ${level}`))).toEqual(
      new Set(['/sequenceKey unblinding', '/position unblinding']),
    );
  });

  it('is for the unblinded technician, once, with balanced blocks, under a published protocol', async () => {
    const { study } = await aStudy(server, { siteCodes: ['TN', 'UP'] });
    const path = `/studies/${study.code}/allocation`;
    const technician = await aMember(server, 'unblinded-technician', study);
    const investigator = await aMember(server, 'principal-investigator', study);
    const body = { blockSizes: [2, 4], slotsPerSite: 6 };
    const seal = (client: Client, sent: object = body) => client.post<AllocationDto>(path, sent);
    await refused(() => seal(technician.client), 409, /Publish the protocol/);
    await publishProtocol(server, study, investigator.personId, aProtocol(['TN', 'UP']));
    await refused(() => seal(new Client(server)), 401);
    for (const role of ['coordinator', 'monitor', 'study-physician', 'statistician'] as const) {
      const member = await aMember(server, role, study);
      await refused(() => seal(member.client), 403);
    }
    await refused(() => seal(investigator.client), 403);
    const unbalanced = await refused(() => seal(technician.client, { ...body, blockSizes: [2, 3, 5] }), 422);
    expect(unbalanced.errors?.map(({ pointer }) => pointer)).toEqual(['/blockSizes/1', '/blockSizes/2']);
    await refused(() => seal(technician.client, { ...body, seed: '00' }), 422);
    await refused(() => seal(technician.client, { ...body, slotsPerSite: 0 }), 422);

    const both = await Promise.all([seal(technician.client), seal(technician.client)]);
    expect(both.map(({ status }) => status).sort()).toEqual([201, 409]);
    expect(await newestEvents(server, study.id)).toMatchObject([
      { kind: 'allocation-sealed', actor_id: technician.personId },
    ]);
    await refused(() => seal(technician.client), 409, /sealed already/);
  });

  it('comes before the first participant, and not where everybody gets the same', async () => {
    const { study, sites } = await aStudy(server, { siteCodes: ['TN'] });
    const technician = await aMember(server, 'unblinded-technician', study);
    const coordinator = await aMember(server, 'coordinator', study);
    const single = {
      design: 'single-group' as const,
      sequences: [{ key: 'only', label: 'Only', conditions: ['cond-alder'] }],
    };
    await publishProtocol(server, study, technician.personId, aProtocol(['TN'], single));
    const seal = () =>
      technician.client.post(`/studies/${study.code}/allocation`, { blockSizes: [2], slotsPerSite: 4 });
    await refused(seal, 409, /nothing to allocate/);
    await setStudyState(server, study, 'running');
    await enrol({ path: `/studies/${study.code}`, coordinator }, sites[0]!);
    await publishProtocol(server, study, technician.personId, aProtocol(['TN']), 2);
    await refused(seal, 409, /enrolled already/);
  });
});

describe('assigning a place', () => {
  const post = (client: Client, participant: ParticipantDto, ifMatch?: number, path = running.path) =>
    client.post<ParticipantDto>(
      `${path}/participants/${participant.id}/allocation`,
      {},
      ifMatch === undefined ? {} : { ifMatch },
    );

  // proves RB-02
  it('waits for consent and eligibility; refused, it uses no place', async () => {
    const { client } = running.coordinator;
    const participant = await enrol(running, running.sites[0]!);
    await refused(() => post(client, participant, 1), 409, /Record the consent first/);
    await consent(server, running.study, participant);
    await refused(() => post(client, participant, 2), 409, /criteria/);
    const ready = await client.put<ParticipantDto>(
      `${running.path}/participants/${participant.id}/eligibility`,
      { criteriaMet: true, checkedOn: today },
      { ifMatch: 2 },
    );
    const { revision } = ready.body;
    await refused(() => post(new Client(server), participant, revision), 401);
    await refused(() => post(client, participant), 428);
    await refused(() => post(client, participant, revision - 1), 412);
    for (const role of ['monitor', 'study-physician'] as const) {
      const member = await aMember(server, role, running.study);
      await refused(() => post(member.client, participant, revision), 403);
    }
    await refused(() => post(running.investigator.client, participant, revision), 403);
    const elsewhere = await aMember(server, 'coordinator', running.study, {
      siteIds: [running.sites[1]!.id],
    });
    await refused(() => post(elsewhere.client, participant, revision), 404);

    const answer = await post(client, participant, revision);
    expect(answer).toMatchObject({ status: 200, body: { state: 'allocated', allocation: { hidden: true } } });
    expect(Object.keys(answer.body.allocation!).sort()).toEqual(['assignedAt', 'hidden']);
    const [event] = await newestEvents(server, running.study.id);
    expect(event).toMatchObject({
      kind: 'allocation-assigned',
      participant_id: participant.id,
      values: { 'participant/state': 'allocated', 'allocation-slot/participantId': participant.id },
    });
    for (const canary of armCanaries) expect(JSON.stringify(event)).not.toContain(canary);

    // Irrevocable: what decided it does not change any more, and no route frees a place.
    const late = { criteriaMet: true, checkedOn: '2020-01-01' };
    const url = `${running.path}/participants/${participant.id}/eligibility`;
    await refused(
      () => client.put(url, late, { ifMatch: answer.body.revision }),
      409,
      /not changed any more/,
    );
    const freeing = server.routes.filter(
      ({ method, path }) => method === 'delete' && path.includes('allocation'),
    );
    expect(freeing).toEqual([]);
  });

  // proves RB-03
  it('clicked twice, answers the same and takes one place', async () => {
    const participant = await eligible(server, running, running.sites[0]!);
    const [one, two] = await Promise.all([
      post(running.coordinator.client, participant, participant.revision),
      post(running.technician.client, participant, participant.revision),
    ]);
    expect([one.status, two.status]).toEqual([200, 200]);
    expect(one.body.allocation?.assignedAt).toBe(two.body.allocation?.assignedAt);
    const again = await post(running.coordinator.client, participant, participant.revision);
    expect(again.status).toBe(200);
    expect(
      (await slotsOf(running.study)).filter(({ participant_id }) => participant_id === participant.id),
    ).toHaveLength(1);
    const assigned = await server.ownerSql(
      "select 1 from audit_event where kind = 'allocation-assigned' and participant_id = $1",
      [participant.id],
    );
    expect(assigned).toHaveLength(1);
  });

  // proves RB-03 and WS-15
  it('under load gives 25 participants 25 places in order at each site, however often it is asked', async () => {
    const busy = await aRunningStudy(server, { slotsPerSite: 25 });
    const people: ParticipantDto[] = [];
    for (let at = 0; at < 25; at += 1) people.push(await eligible(server, busy, busy.sites[at % 2]!));
    const answers = await Promise.all(
      [...people, ...people].map((one) => post(busy.coordinator.client, one, one.revision, busy.path)),
    );
    expect(answers.map(({ status }) => status)).toEqual(Array.from({ length: 50 }, () => 200));
    const used = (await slotsOf(busy.study)).filter(({ participant_id }) => participant_id !== null);
    expect(new Set(used.map(({ participant_id }) => participant_id)).size).toBe(25);
    for (const [site, expected] of [
      [busy.sites[0]!, 13],
      [busy.sites[1]!, 12],
    ] as const) {
      const positions = used.filter(({ site_id }) => site_id === site.id).map(({ position }) => position);
      expect(positions).toEqual(Array.from({ length: expected }, (_, at) => at + 1));
    }
    const [trail] = await server.ownerSql<{ n: number }>(
      "select count(*)::int as n from audit_event where study_id = $1 and kind = 'allocation-assigned'",
      [busy.study.id],
    );
    expect(trail?.n).toBe(25);
  }, 180_000);

  it('ends with the list, site by site, and with the study', async () => {
    const small = await aRunningStudy(server, { slotsPerSite: 1 });
    await allocate(small, await eligible(server, small, small.sites[0]!));
    const next = await eligible(server, small, small.sites[0]!);
    await refused(() => post(small.coordinator.client, next, next.revision, small.path), 409, /All places/);
    await allocate(small, await eligible(server, small, small.sites[1]!));
    // proves LK-01
    const last = await eligible(server, small, small.sites[1]!);
    await setStudyState(server, small.study, 'locked');
    await refused(() => post(small.coordinator.client, last, last.revision, small.path), 409, /locked/);
  });

  it('takes one order over all sites where the protocol does not stratify', async () => {
    const { study, sites } = await aStudy(server, { siteCodes: ['TN', 'UP'] });
    const coordinator = await aMember(server, 'coordinator', study);
    const technician = await aMember(server, 'unblinded-technician', study);
    const investigator = await aMember(server, 'principal-investigator', study);
    const path = `/studies/${study.code}`;
    const whole = { study, sites, path, coordinator, technician, investigator };
    await publishProtocol(
      server,
      study,
      investigator.personId,
      aProtocol(['TN', 'UP'], { allocation: { blockSizes: [2], stratifyBySite: false } }),
    );
    await technician.client.post(`${path}/allocation`, { blockSizes: [2], slotsPerSite: 2 });
    await setStudyState(server, study, 'running');
    for (const site of [1, 0, 1]) await allocate(whole, await eligible(server, whole, sites[site]!));
    const used = (await slotsOf(study)).filter(({ participant_id }) => participant_id !== null);
    const inOrder = used.sort((a, b) => a.position - b.position);
    expect(inOrder.map(({ position, site_id }) => [position, site_id])).toEqual([
      [1, sites[1]!.id],
      [2, sites[0]!.id],
      [3, sites[1]!.id],
    ]);
    const own = await aMember(server, 'unblinded-technician', study, { siteIds: [sites[0]!.id] });
    const list = await own.client.get<{ items: WorklistItemDto[] }>(`${path}/allocation/worklist`);
    expect(new Set(list.body.items.map(({ siteCode }) => siteCode))).toEqual(new Set(['TN']));
  });
});

describe('who knows the condition', () => {
  let blinding: RunningStudy;
  let people: ParticipantDto[];
  const truth = new Map<string, string>();

  beforeAll(async () => {
    blinding = await aRunningStudy(server, { slotsPerSite: 24 });
    people = [];
    for (let at = 0; at < 24; at += 1) {
      people.push(await allocate(blinding, await eligible(server, blinding, blinding.sites[at % 2]!)));
    }
    for (const { participant_id, sequence_key } of await slotsOf(blinding.study)) {
      if (participant_id !== null) truth.set(participant_id, sequence_key);
    }
  }, 180_000);

  it('the technician, from the worklist: whom to give what, and which samples to take', async () => {
    const list = await blinding.technician.client.get<{
      items: WorklistItemDto[];
      nextCursor: string | null;
    }>(`${blinding.path}/allocation/worklist`);
    expect(list.body.items).toHaveLength(48);
    for (const item of list.body.items) {
      const first = truth.get(item.participantId) === 'seq-alder' ? 'cond-alder' : 'cond-birch';
      const second = first === 'cond-alder' ? 'cond-birch' : 'cond-alder';
      expect(item.condition.key).toBe(item.period === 1 ? first : second);
      expect(item.visits).toEqual([
        {
          key: `period-${item.period}`,
          label: `Period ${item.period}`,
          steps: [{ label: 'Take the sample', plannedMinute: 40 }],
        },
      ]);
    }
    const page = await blinding.technician.client.get<{ items: WorklistItemDto[]; nextCursor: string }>(
      `${blinding.path}/allocation/worklist?limit=10`,
    );
    const rest = await blinding.technician.client.get<{ items: WorklistItemDto[] }>(
      `${blinding.path}/allocation/worklist?cursor=${page.body.nextCursor}`,
    );
    expect([...page.body.items, ...rest.body.items]).toEqual(list.body.items);
    const own = await aMember(server, 'unblinded-technician', blinding.study, {
      siteIds: [blinding.sites[1]!.id],
    });
    const limited = await own.client.get<{ items: WorklistItemDto[] }>(
      `${blinding.path}/allocation/worklist`,
    );
    expect(new Set(limited.body.items.map(({ siteCode }) => siteCode))).toEqual(new Set(['UP']));
    expect((await new Client(server).get(`${blinding.path}/allocation/worklist`)).status).toBe(401);
    const gone = people[0]!;
    await blinding.coordinator.client.post(
      `${blinding.path}/participants/${gone.id}/withdrawal`,
      { reason: 'own wish', withdrawnOn: today, earlierData: 'kept', safetyFollowUp: true },
      { ifMatch: gone.revision },
    );
    const after = await blinding.technician.client.get<{ items: WorklistItemDto[] }>(
      `${blinding.path}/allocation/worklist`,
    );
    expect(after.body.items.some(({ participantId }) => participantId === gone.id)).toBe(false);
    expect(after.body.items).toHaveLength(46);
    const one = await blinding.technician.client.get<ParticipantDto>(
      `${blinding.path}/participants/${people[0]!.id}`,
    );
    expect(one.body.allocation).toMatchObject({ hidden: false, sequence: { key: truth.get(people[0]!.id) } });
  });

  it('work done unblinded, by the service; nobody blinded, and not the physician without an opening', async () => {
    const [one] = people;
    const as = (role: Role, unblinded: boolean) =>
      someone({
        personId: blinding.technician.personId,
        studyId: blinding.study.id,
        role,
        siteIds: null,
        unblinded,
      });
    const ask = (actor: Parameters<typeof acting>[1], period = 1) =>
      acting(server.orm, actor, () => conditionOf(server.orm.em, one!.id, period));
    const first = truth.get(one!.id) === 'seq-alder' ? 'cond-alder' : 'cond-birch';
    expect((await ask(as('unblinded-technician', true)))?.key).toBe(first);
    expect((await ask(theSystem))?.key).toBe(first);
    expect((await ask(theSystem, 2))?.key).not.toBe(first);
    expect(await ask(theSystem, 3)).toBeNull();
    for (const actor of [
      as('coordinator', false),
      as('principal-investigator', false),
      as('study-physician', true),
    ]) {
      await expect(ask(actor)).rejects.toMatchObject({ status: 404 });
    }
  });

  // proves RB-04 and AC-03
  it('nobody blinded, from any answer of these routes; nor the physician, the administrator or the statistician', async () => {
    const { study, path } = blinding;
    const forbidden = new RegExp(
      [...armCanaries, 'sequenceKey', 'sequence_key', '"seed"', '"salt"', 'blockSizes'].join('|'),
    );
    const gets = server.routes.filter(
      ({ method, path: route }) =>
        method === 'get' && /\/studies\/:studyCode\/(participants|allocation|unblinding)/.test(route),
    );
    expect(gets.length).toBeGreaterThanOrEqual(8);
    const roles = [
      'principal-investigator',
      'coordinator',
      'monitor',
      'statistician',
      'study-physician',
    ] as const;
    let answered = 0;
    for (const role of roles) {
      const { client } = await aMember(server, role, study);
      for (const { path: route } of gets) {
        for (const { id, code } of people.slice(0, 4)) {
          const url = route
            .replace(':studyCode', study.code)
            .replace(':participantId', id)
            .replace(':code', code);
          const answer = await client.get(url);
          expect(JSON.stringify(answer.body), `${role} ${url}`).not.toMatch(forbidden);
          if (answer.status === 200) answered += 1;
        }
      }
      const unreachable = await client.get(`${path}/allocation/worklist`);
      expect(unreachable.status, role).toBe(404);
      expect((await client.get(`${path}/allocation/opened`)).status, role).toBe(409);
    }
    expect(answered).toBeGreaterThan(50);
  });

  // proves RB-05, for what this slice gives out
  it('cannot be told from order, ids, codes, times, sizes or counts', async () => {
    const { client } = await aMember(server, 'monitor', blinding.study);
    const seen = (await client.get<{ items: ParticipantDto[] }>(`${blinding.path}/participants`)).body.items;
    const features: Record<string, (one: ParticipantDto, at: number) => number> = {
      order: (_, at) => at,
      'order is odd': (_, at) => at % 2,
      id: ({ id }) => Number.parseInt(id.slice(0, 8), 16),
      code: ({ code }) => code.charCodeAt(code.length - 1),
      time: ({ allocation }) => Date.parse(allocation!.assignedAt),
      'millisecond of the time': ({ allocation }) => Date.parse(allocation!.assignedAt) % 1000,
      size: (one) => JSON.stringify(one).length,
      revision: ({ revision }) => revision,
    };
    const isAlder = seen.map(({ id }) => truth.get(id) === 'seq-alder');
    for (const [name, feature] of Object.entries(features)) {
      const values = seen.map(feature);
      // Eight looks at chance itself: 0.1 % over all of them, so that one run in a thousand fails by chance.
      expect(permutationP(values, isAlder), name).toBeGreaterThan(0.001 / 8);
    }
    const events = await server.ownerSql<{ size: number; participant_id: string }>(
      `select length(e.changes::text) as size, participant_id from audit_event e where study_id = $1 and kind = 'allocation-assigned'`,
      [blinding.study.id],
    );
    expect(new Set(events.map(({ size }) => size)).size).toBe(1);
  });

  it('rules alone give no blinded role a right on places', () => {
    for (const role of [
      'principal-investigator',
      'coordinator',
      'monitor',
      'statistician',
      'administrator',
      'study-physician',
    ] as const) {
      const ability = abilityFor({
        personId: 'p',
        studyId: 's',
        role,
        siteIds: null,
        unblinded: role === 'study-physician',
      });
      expect(ability.can('read', 'AllocationSlot'), role).toBe(false);
    }
  });
});

/**
 * Two-sided permutation test of the area under the curve with which a feature would tell the arm: how often a random
 * relabelling does at least as well. With ties at one half. Deterministic generator: no flicker for given values.
 */
function permutationP(values: readonly number[], labels: readonly boolean[], rounds = 10_000): number {
  const area = (marked: readonly boolean[]): number => {
    let won = 0;
    let pairs = 0;
    values.forEach((one, i) =>
      values.forEach((other, j) => {
        if (!marked[i] || marked[j]) return;
        pairs += 1;
        won += one > other ? 1 : one === other ? 0.5 : 0;
      }),
    );
    return Math.abs(won / pairs - 0.5);
  };
  const seen = area(labels);
  let state = 20261201;
  const random = () => (state = (state * 1103515245 + 12345) % 2147483648) / 2147483648;
  let asGood = 0;
  for (let round = 0; round < rounds; round += 1) {
    const shuffled = [...labels];
    for (let at = shuffled.length - 1; at > 0; at -= 1) {
      const other = Math.floor(random() * (at + 1));
      [shuffled[at], shuffled[other]] = [shuffled[other]!, shuffled[at]!];
    }
    if (area(shuffled) >= seen - 1e-12) asGood += 1;
  }
  return (asGood + 1) / (rounds + 1);
}
