import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { systemChain } from '#backend/database/act.ts';
import type { HeldMembershipDto, MemberDto, PersonDto } from '#schemas/api/people.ts';
import { confirmPassword, inviteFirstAdministrator } from '#backend/modules/accounts/index.ts';
import { acting, theSystem } from '#tests/support/acting.ts';
import { Client } from '#tests/support/client.ts';
import { startTestServer, type TestServer } from '#tests/support/server.ts';
import { aMember, aPerson, aStudy, password, signedIn, type Member } from '#tests/support/setup-builders.ts';
import { eventCount, newestEvents } from '#tests/support/trail.ts';

let server: TestServer;
let administrator: Member;
let investigator: Member;
let study: Awaited<ReturnType<typeof aStudy>>;

beforeAll(async () => {
  server = await startTestServer();
  study = await aStudy(server, { code: 'marsh' });
  administrator = await aMember(server, 'administrator', null);
  investigator = await aMember(server, 'principal-investigator', study.study);
});
afterAll(() => server.stop());

/** The token of the newest queued mail to this address. */
async function mailedToken(to: string): Promise<{ template: string; token: string }> {
  const [row] = await server.ownerSql<{ template: string; params: { path?: string } }>(
    'select template, params from mail_outbox where recipient = $1 order by created_at desc limit 1',
    [to],
  );
  return { template: row?.template ?? '', token: row?.params.path?.split('#')[1] ?? '' };
}

describe('inviting people', () => {
  it('invites by e-mail, opens the account once, and leaves both on record', async () => {
    const email = 'Reed.Warbler@example.test';
    const invited = await administrator.client.post<PersonDto>('/people', { email, name: 'Reed Warbler' });
    expect(invited.status).toBe(201);
    expect(invited.body).toMatchObject({
      email: 'reed.warbler@example.test',
      status: 'invited',
      memberships: [],
    });
    const [invitation] = await newestEvents(server, systemChain);
    expect(invitation).toMatchObject({
      kind: 'person-invited',
      actor_id: administrator.personId,
      subject: `person/${invited.body.id}`,
      values: { 'person/name': 'Reed Warbler', 'person/status': 'invited' },
    });

    const { template, token } = await mailedToken('reed.warbler@example.test');
    expect(template).toBe('invitation');
    const visitor = new Client(server);
    const lookUp = await visitor.post('/invitations/look-up', { token });
    expect(lookUp.body).toEqual({ name: 'Reed Warbler', email: 'reed.warbler@example.test' });

    const acceptance = { token, password: 'a heron stands in the reeds', acceptDeclaration: true };
    const weak = await visitor.post('/invitations/acceptance', {
      ...acceptance,
      password: 'Vesselry2026!!!',
    });
    expect(weak).toMatchObject({ status: 422, body: { slug: 'password-too-weak' } });
    const undeclared = await visitor.post('/invitations/acceptance', {
      ...acceptance,
      acceptDeclaration: false,
    });
    expect(undeclared.status).toBe(422);
    expect((await visitor.post('/invitations/acceptance', acceptance)).status).toBe(204);
    const [accepted] = await newestEvents(server, systemChain);
    expect(accepted).toMatchObject({ kind: 'invitation-accepted', actor_id: invited.body.id });
    expect(JSON.stringify(accepted)).not.toContain('argon2');

    const session = await visitor.post('/session', { email, password: acceptance.password });
    expect(session.status).toBe(201);
    // proves EM-03
    expect(await visitor.post('/invitations/acceptance', acceptance)).toMatchObject({
      status: 404,
      body: { slug: 'link-not-valid' },
    });
    const person = await administrator.client.get<PersonDto>(`/people/${invited.body.id}`);
    expect(person.body.status).toBe('active');
    expect(person.body.declarationAcceptedAt).not.toBeNull();
  });

  // proves EM-03
  it('keeps the token hashed, ends older links and links that have run out', async () => {
    const invited = await administrator.client.post<PersonDto>('/people', {
      email: 'old.link@example.test',
      name: 'Old Link',
    });
    const { token: first } = await mailedToken('old.link@example.test');
    const again = await administrator.client.post(`/people/${invited.body.id}/invitation`);
    expect(again.status).toBe(204);
    const { token: second } = await mailedToken('old.link@example.test');
    expect(second).toMatch(/^[\w-]{43}$/);
    const rows = await server.ownerSql<{ token_hash: string }>('select token_hash from invitation');
    expect(rows.every(({ token_hash }) => /^[0-9a-f]{64}$/.test(token_hash))).toBe(true);
    const visitor = new Client(server);
    expect((await visitor.post('/invitations/look-up', { token: first })).status).toBe(404);
    expect((await visitor.post('/invitations/look-up', { token: second })).status).toBe(200);
    await server.ownerSql(
      "update invitation set expires_at = now() - interval '1 second' where person_id = $1 and used_at is null",
      [invited.body.id],
    );
    expect((await visitor.post('/invitations/look-up', { token: second })).status).toBe(404);
  });

  it('gives one of two simultaneous acceptances the account', async () => {
    await administrator.client.post('/people', { email: 'twice@example.test', name: 'Twice Asked' });
    const { token } = await mailedToken('twice@example.test');
    const acceptance = { token, password: 'two swans on one pond', acceptDeclaration: true };
    const answers = await Promise.all(
      [1, 2, 3].map(() => new Client(server).post('/invitations/acceptance', acceptance)),
    );
    expect(answers.map(({ status }) => status).sort()).toEqual([204, 404, 404]);
  });

  // proves ES-05
  it('gives a sign-in name never twice, not even after deactivation', async () => {
    const person = await aPerson(server);
    const before = await administrator.client.get<PersonDto>(`/people/${person.id}`);
    const refused = await administrator.client.post(`/people/${person.id}/deactivation`, { reason: 'left' });
    expect(refused.status).toBe(428);
    const closed = await administrator.client.post(
      `/people/${person.id}/deactivation`,
      { reason: 'left the laboratory' },
      { ifMatch: before.etag! },
    );
    expect(closed).toMatchObject({ status: 200, body: { status: 'deactivated' } });
    const again = await administrator.client.post('/people', { email: person.email, name: 'Someone Else' });
    expect(again).toMatchObject({
      status: 409,
      body: { slug: 'already-exists', errors: [{ pointer: '/email' }] },
    });
    expect((await administrator.client.delete(`/people/${person.id}`)).status).toBe(404);
  });

  it('is for administrators alone, and for bodies that say what they should', async () => {
    const before = await eventCount(server);
    const body = { email: 'no.one@example.test', name: 'No One' };
    expect((await new Client(server).post('/people', body)).status).toBe(401);
    expect((await investigator.client.post('/people', body)).status).toBe(403);
    expect((await investigator.client.get('/people')).status).toBe(403);
    expect((await investigator.client.get(`/people/${administrator.personId}`)).status).toBe(403);
    expect((await administrator.client.post('/people', { ...body, email: 'no one' })).status).toBe(422);
    const injected = await administrator.client.post('/people', {
      ...body,
      name: 'No\r\nBcc: all@example.test',
    });
    expect(injected).toMatchObject({ status: 422, body: { errors: [{ pointer: '/name' }] } });
    expect((await administrator.client.post('/people', { ...body, status: 'active' })).status).toBe(422);
    expect(await eventCount(server)).toBe(before);
  });

  it('lists people by name a page at a time, finding a part of a name literally', async () => {
    for (const name of ['Zz Alder', 'Zz Birch_tree', 'Zz Cedar']) await aPerson(server, name);
    const first = await administrator.client.get<{ items: PersonDto[]; nextCursor: string }>(
      '/people?search=zz&limit=2',
    );
    expect(first.body.items.map(({ name }) => name)).toEqual(['Zz Alder', 'Zz Birch_tree']);
    const next = await administrator.client.get<{ items: PersonDto[]; nextCursor: string | null }>(
      `/people?search=zz&limit=2&cursor=${first.body.nextCursor}`,
    );
    expect(next.body).toMatchObject({ items: [{ name: 'Zz Cedar' }], nextCursor: null });
    const literal = await administrator.client.get<{ items: PersonDto[] }>('/people?search=h_t');
    expect(literal.body.items.map(({ name }) => name)).toEqual(['Zz Birch_tree']);
    expect((await administrator.client.get('/people?sort=name')).status).toBe(400);
    expect((await administrator.client.get('/people?cursor=zzz')).status).toBe(400);
    expect(JSON.stringify(first.body)).not.toContain('asswordHash');
  });
});

describe('a new password', () => {
  // proves EM-04
  it('is asked for with the same answer for every address, and only a known one gets mail', async () => {
    const known = await aPerson(server);
    const time = async (email: string) => {
      const start = performance.now();
      const answer = await new Client(server).post('/password-resets', { email });
      return { answer, took: performance.now() - start };
    };
    const mails = await server.ownerSql<{ n: number }>('select count(*)::int n from mail_outbox');
    const [yes, no] = [await time(known.email), await time('nobody.at.all@example.test')];
    expect([yes.answer.status, no.answer.status]).toEqual([202, 202]);
    expect(yes.answer.body).toEqual(no.answer.body);
    expect(Math.abs(yes.took - no.took)).toBeLessThan(150);
    const after = await server.ownerSql<{ n: number }>('select count(*)::int n from mail_outbox');
    expect(after[0]!.n).toBe(mails[0]!.n + 1);
  });

  it('is chosen once, ends every session and tells its owner', async () => {
    const person = await aPerson(server);
    const elsewhere = await signedIn(server, person.email);
    await new Client(server).post('/password-resets', { email: person.email.toUpperCase() });
    const { template, token } = await mailedToken(person.email);
    expect(template).toBe('password-reset');
    const visitor = new Client(server);
    // A reset's link opens no invitation, and the other way round.
    expect((await visitor.post('/invitations/look-up', { token })).status).toBe(404);
    const body = { token, password: 'a new sedge by old water' };
    expect((await visitor.post('/password-resets/completion', body)).status).toBe(204);
    expect((await visitor.post('/password-resets/completion', body)).status).toBe(404);
    expect((await elsewhere.get('/session')).status).toBe(401);
    expect((await visitor.post('/session', { email: person.email, password })).status).toBe(401);
    expect((await visitor.post('/session', { email: person.email, password: body.password })).status).toBe(
      201,
    );
    expect((await mailedToken(person.email)).template).toBe('account-changed');
    const kinds = (await newestEvents(server, systemChain, 4)).map(({ kind }) => kind);
    expect(kinds).toEqual(['signed-in', 'sign-in-refused', 'password-changed', 'password-reset-started']);
  });

  // proves ES-04
  it('is started by an administrator, who can never set or see it', async () => {
    const person = await aPerson(server);
    expect((await administrator.client.post(`/people/${person.id}/password-reset`)).status).toBe(204);
    expect((await mailedToken(person.email)).template).toBe('password-reset');
    const setters = server.routes.filter(({ body }) => JSON.stringify(body ?? {}).includes('"password"'));
    for (const { gate, path } of setters) {
      if (gate !== 'public') expect(path, 'asks for the actor’s own password').not.toMatch(/^\/people/);
    }
  });
});

describe('deactivation', () => {
  // proves AC-04
  it('ends the sessions at once, asks for the revision seen, and spares the administrator who does it', async () => {
    const member = await aMember(server, 'coordinator', study.study);
    const seen = await administrator.client.get<PersonDto>(`/people/${member.personId}`);
    const address = `/people/${member.personId}/deactivation`;
    const body = { reason: 'left the laboratory' };
    const stale = await administrator.client.post(address, body, { ifMatch: seen.body.revision + 1 });
    expect(stale).toMatchObject({ status: 412, body: { currentRevision: seen.body.revision } });
    expect((await investigator.client.post(address, body, { ifMatch: seen.etag! })).status).toBe(403);
    expect((await member.client.get('/studies/marsh')).status).toBe(200);
    expect((await administrator.client.post(address, body, { ifMatch: seen.etag! })).status).toBe(200);
    expect((await member.client.get('/studies/marsh')).status).toBe(401);
    const [event] = await newestEvents(server, systemChain);
    expect(event).toMatchObject({
      kind: 'person-deactivated',
      reason: 'left the laboratory',
      values: { 'person/status': 'deactivated' },
    });
    const self = await administrator.client.get<PersonDto>(`/people/${administrator.personId}`);
    const own = await administrator.client.post(`/people/${administrator.personId}/deactivation`, body, {
      ifMatch: self.etag!,
    });
    expect(own.status).toBe(409);
    expect((await administrator.client.get(`/people/${crypto.randomUUID()}`)).status).toBe(404);
  });
});

describe('memberships', () => {
  const grant = (body: Record<string, unknown>) =>
    administrator.client.post<HeldMembershipDto>('/memberships', {
      studyCode: 'marsh',
      siteIds: null,
      unblinded: false,
      reason: 'joins the team',
      ...body,
    });

  // proves AC-01 AT-03
  it('are granted, changed and revoked, each dated in the study’s chain with its reason', async () => {
    const person = await aPerson(server);
    const [site] = study.sites;
    const granted = await grant({ personId: person.id, role: 'monitor', siteIds: [site!.id] });
    expect(granted).toMatchObject({
      status: 201,
      body: { role: 'monitor', siteCodes: ['AA'], status: 'active' },
    });
    const [first] = await newestEvents(server, study.study.id);
    expect(first).toMatchObject({
      kind: 'membership-granted',
      actor_id: administrator.personId,
      role: 'administrator',
      subject: `membership/${granted.body.id}`,
      reason: 'joins the team',
      values: { 'membership/role': 'monitor', 'membership/unblinded': false },
    });
    const address = `/memberships/${granted.body.id}`;
    const change = { siteIds: null, unblinded: true, reason: 'appointed unblinded' };
    expect((await administrator.client.put(address, change)).status).toBe(428);
    expect((await administrator.client.put(address, change, { ifMatch: 99 })).status).toBe(412);
    expect((await investigator.client.put(address, change, { ifMatch: granted.etag! })).status).toBe(403);
    const changed = await administrator.client.put<HeldMembershipDto>(address, change, {
      ifMatch: granted.etag!,
    });
    expect(changed).toMatchObject({ status: 200, body: { siteIds: null, unblinded: true } });
    const revoked = await administrator.client.post(
      `${address}/revocation`,
      { reason: 'the visit is over' },
      { ifMatch: changed.etag! },
    );
    expect(revoked).toMatchObject({ status: 200, body: { status: 'revoked' } });
    const events = await newestEvents(server, study.study.id, 3);
    expect(events.map(({ kind, reason }) => [kind, reason])).toEqual([
      ['membership-revoked', 'the visit is over'],
      ['membership-changed', 'appointed unblinded'],
      ['membership-granted', 'joins the team'],
    ]);
    expect((await grant({ personId: person.id, role: 'monitor' })).body).toMatchObject({
      slug: 'state-forbids',
    });
  });

  // proves AC-04
  it('give nothing from the next request on once they are revoked', async () => {
    const member = await aMember(server, 'statistician', study.study);
    expect((await member.client.get('/studies/marsh')).status).toBe(200);
    const { body } = await administrator.client.get<PersonDto>(`/people/${member.personId}`);
    const [held] = body.memberships;
    await administrator.client.post(
      `/memberships/${held!.id}/revocation`,
      { reason: 'contract ended' },
      { ifMatch: held!.revision },
    );
    expect((await member.client.get('/studies/marsh')).status).toBe(404);
    expect((await member.client.get('/session')).body).toMatchObject({ acting: null, rules: [] });
  });

  it('follow the rules of roles, sites and blinding', async () => {
    const { id: personId } = await aPerson(server);
    const other = await aStudy(server);
    const before = await eventCount(server);
    const refusals = [
      { role: 'principal-investigator', unblinded: true },
      { role: 'study-physician', unblinded: false },
      { role: 'statistician', siteIds: [study.sites[0]!.id] },
      { role: 'monitor', siteIds: [other.sites[0]!.id] },
      { role: 'administrator' },
      { role: 'monitor', studyCode: null },
      { role: 'gardener' },
    ];
    for (const wanted of refusals) {
      const answer = await grant({ personId, ...wanted });
      expect(answer.status, JSON.stringify(wanted)).toBe(422);
    }
    expect((await grant({ personId, role: 'monitor', studyCode: 'no-such-study' })).status).toBe(404);
    expect((await grant({ personId: crypto.randomUUID(), role: 'monitor' })).status).toBe(404);
    expect((await new Client(server).post('/memberships', {})).status).toBe(401);
    expect(await eventCount(server)).toBe(before);
  });

  // proves RB-04 AC-05
  it('never make one person blinded and unblinded, nor administrator and member', async () => {
    const { id: personId } = await aPerson(server);
    expect((await grant({ personId, role: 'coordinator' })).status).toBe(201);
    expect((await grant({ personId, role: 'study-physician', unblinded: true })).status).toBe(409);
    expect((await grant({ personId, role: 'administrator', studyCode: null })).status).toBe(409);
    const twice = await grant({ personId, role: 'coordinator' });
    expect(twice.status).toBe(409);
    expect((await grant({ personId: administrator.personId, role: 'monitor' })).status).toBe(409);
  });

  it('granted at the same instant cannot contradict each other', async () => {
    const { id: personId } = await aPerson(server);
    const answers = await Promise.all([
      grant({ personId, role: 'coordinator' }),
      grant({ personId, role: 'unblinded-technician', unblinded: true }),
      grant({ personId, role: 'monitor', unblinded: true }),
      grant({ personId, role: 'monitor' }),
    ]);
    const granted = answers.filter(({ status }) => status === 201).map(({ body }) => body.unblinded);
    expect(new Set(granted).size).toBe(1);
  });

  it('are shown to the investigator of the study and to no other member', async () => {
    const members = await investigator.client.get<MemberDto[]>('/studies/marsh/members');
    expect(members.status).toBe(200);
    expect(members.body[0]).toMatchObject({
      personId: investigator.personId,
      role: 'principal-investigator',
    });
    const other = await aStudy(server);
    expect((await investigator.client.get(`/studies/${other.study.code}/members`)).status).toBe(404);
    const coordinator = await aMember(server, 'coordinator', study.study);
    expect((await coordinator.client.get('/studies/marsh/members')).status).toBe(404);
    expect((await administrator.client.get('/studies/marsh/members')).status).toBe(404);
    const asAdministrator = await administrator.client.get<MemberDto[]>(
      `/administration/studies/${study.study.id}/members`,
    );
    expect(asAdministrator.body.map(({ id }) => id)).toEqual(
      (await investigator.client.get<MemberDto[]>('/studies/marsh/members')).body.map(({ id }) => id),
    );
    expect((await investigator.client.get(`/administration/studies/${study.study.id}/members`)).status).toBe(
      403,
    );
  });
});

describe('the password asked for again before something binding', () => {
  const confirm = (member: Member, tried: string) =>
    acting(
      server.orm,
      { ...theSystem, personId: member.personId, role: 'principal-investigator', studyId: study.study.id },
      () => confirmPassword(server.orm.em, member.personId, tried),
    );

  // proves ES-03
  it('passes with the right one; five wrong ones are on record and close the door, even to the right one', async () => {
    const signer = await aMember(server, 'principal-investigator', study.study);
    expect(await confirm(signer, password)).toMatchObject({ id: signer.personId, name: signer.name });
    for (let n = 0; n < 5; n += 1) {
      await expect(confirm(signer, 'not the right one')).rejects.toMatchObject({
        status: 403,
        slug: 'password-wrong',
      });
    }
    await expect(confirm(signer, password)).rejects.toMatchObject({ status: 429, slug: 'try-again-later' });
    const events = await newestEvents(server, study.study.id, 5);
    expect(events.map(({ kind, subject }) => [kind, subject])).toEqual(
      Array.from({ length: 5 }, () => ['signature-refused', `person/${signer.personId}`]),
    );
    expect(await confirm(investigator, password)).toMatchObject({ id: investigator.personId });
  });

  // proves ES-05
  it('is refused to who never accepted that a signature binds', async () => {
    const signer = await aMember(server, 'principal-investigator', study.study);
    await server.ownerSql('update person set declaration_accepted_at = null where id = $1', [
      signer.personId,
    ]);
    await expect(confirm(signer, password)).rejects.toMatchObject({ status: 409 });
  });
});

describe('the first administrator', () => {
  it('is invited by a command on the server while there is none, and never after', async () => {
    const invite = (email: string) =>
      acting(fresh.orm, theSystem, () =>
        inviteFirstAdministrator(fresh.orm.em, { email, name: 'First One' }),
      );
    const fresh = await startTestServer();
    try {
      const { path } = await invite('first@example.test');
      await expect(invite('second@example.test')).rejects.toMatchObject({ status: 409 });
      const again = await invite('First@example.test');
      const accept = (link: string) =>
        new Client(fresh).post('/invitations/acceptance', {
          token: link.split('#')[1],
          password,
          acceptDeclaration: true,
        });
      expect((await accept(path)).status).toBe(404);
      expect((await accept(again.path)).status).toBe(204);
      const client = await signedIn(fresh, 'first@example.test');
      expect((await client.get('/people')).status).toBe(200);
      await expect(invite('first@example.test')).rejects.toMatchObject({ status: 409 });
    } finally {
      await fresh.stop();
    }
  });
});
