import { randomUUID } from 'node:crypto';
import { roleNames, unblindedByWork, type Role } from '#schemas/vocabulary/roles.ts';
import { createPerson, grantMembership, hashPassword } from '#backend/modules/accounts/index.ts';
import { addSite, createStudy } from '#backend/modules/studies/index.ts';
import type { Site } from '#backend/modules/studies/site.entity.ts';
import type { Study } from '#backend/modules/studies/study.entity.ts';
import { acting, theSystem } from './acting.ts';
import { Client } from './client.ts';
import type { TestServer } from './server.ts';

/** Everybody's password in tests; hashed once, because hashing is slow on purpose. */
export const password = 'sedge and willow by the water';
const passwordHash = hashPassword(password);

let made = 0;
const number = (): number => (made += 1);

/** An account with a password, in no study. */
export async function aPerson(server: TestServer, name = `Person ${number()}`) {
  const email = `${name.toLowerCase().replaceAll(/\W+/g, '.')}.${randomUUID().slice(0, 6)}@example.test`;
  const hash = await passwordHash;
  return acting(server.orm, theSystem, () =>
    createPerson(server.orm.em, { email, name, passwordHash: hash }),
  );
}

/** A study in setting-up, with two sites unless said otherwise. */
export async function aStudy(
  server: TestServer,
  { code = `study-${number()}`, siteCodes = ['AA', 'BB'] }: { code?: string; siteCodes?: string[] } = {},
): Promise<{ study: Study; sites: Site[] }> {
  const study = await acting(server.orm, theSystem, () =>
    createStudy(server.orm.em, { code, name: code.toUpperCase(), title: `An invented study called ${code}` }),
  );
  const sites: Site[] = [];
  for (const siteCode of siteCodes) {
    const site = { code: siteCode, name: `Site ${siteCode}`, timeZone: 'Etc/UTC' };
    sites.push(await acting(server.orm, theSystem, () => addSite(server.orm.em, study.id, site)));
  }
  return { study, sites };
}

export interface Member {
  client: Client;
  personId: string;
  membershipId: string;
  email: string;
  name: string;
}

interface MemberOptions {
  siteIds?: string[] | null;
  unblinded?: boolean;
  /** Someone who is already there gets one more membership. */
  person?: { id: string; email: string; name: string };
}

/** Someone with this role, signed in and acting in it; an administrator belongs to no study. */
export async function aMember(
  server: TestServer,
  role: Role,
  study: Pick<Study, 'id'> | null,
  { siteIds = null, unblinded = unblindedByWork.includes(role), person }: MemberOptions = {},
): Promise<Member> {
  const someone = person ?? (await aPerson(server, `${roleNames[role]} ${number()}`));
  const granted = { personId: someone.id, studyId: study?.id ?? null, role, siteIds, unblinded };
  const membership = await acting(server.orm, theSystem, () => grantMembership(server.orm.em, granted));
  const client = await signedIn(server, someone.email, membership.id);
  const { id: personId, email, name } = someone;
  return { client, personId, membershipId: membership.id, email, name };
}

/** Signs in, and acts by this membership where one is given. */
export async function signedIn(server: TestServer, email: string, membershipId?: string): Promise<Client> {
  const client = new Client(server);
  const session = await client.post('/session', { email, password });
  if (session.status !== 201)
    throw new Error(`Sign-in answered ${session.status}: ${JSON.stringify(session.body)}`);
  if (membershipId !== undefined) {
    const acting = await client.put('/session/acting', { membershipId });
    if (acting.status !== 200) throw new Error(`Acting answered ${acting.status}`);
  }
  return client;
}
