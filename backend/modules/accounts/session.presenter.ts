import { packRules } from '@casl/ability/extra';
import type { EntityManager } from '@mikro-orm/postgresql';
import { createHmac } from 'node:crypto';
import { abilityFor } from '#schemas/abilities/ability.ts';
import type { MembershipDto, SessionDto } from '#schemas/api/accounts.ts';
import type { Deps } from '#backend/http/deps.ts';
import { notFound } from '#backend/http/problem.ts';
import { SiteSchema } from '../studies/site.entity.ts';
import { StudySchema, type Study } from '../studies/study.entity.ts';
import { MembershipSchema, type Membership } from './membership.entity.ts';
import { PersonSchema } from './person.entity.ts';

const presentMembership = (membership: Membership, study: Study | undefined): MembershipDto => ({
  id: membership.id,
  studyCode: study?.code ?? null,
  studyName: study?.name ?? null,
  role: membership.role,
  siteIds: membership.siteIds ?? null,
  unblinded: membership.unblinded,
});

/** Who is signed in, what they may be, and what they are now. */
export async function presentSession(
  { orm: { em }, settings }: Deps,
  personId: string,
  actingId: string | null | undefined,
): Promise<SessionDto> {
  const person = await em.findOne(PersonSchema, personId);
  if (person === null) throw notFound('This account');
  const memberships = await em.find(MembershipSchema, { personId, status: 'active' });
  const studyIds = memberships.flatMap(({ studyId }) => (studyId == null ? [] : [studyId]));
  const studies = new Map(
    (await em.find(StudySchema, { id: { $in: studyIds } })).map((row) => [row.id, row]),
  );
  const studyOf = (row: Membership): Study | undefined =>
    row.studyId == null ? undefined : studies.get(row.studyId);
  const acting = memberships.find(({ id }) => id === actingId);
  const presented = memberships
    .map((row) => presentMembership(row, studyOf(row)))
    .sort((a, b) => `${a.studyName} ${a.role}`.localeCompare(`${b.studyName} ${b.role}`, 'en'));
  return {
    person: { id: person.id, name: person.name, email: person.email },
    memberships: presented,
    ...(acting === undefined
      ? { acting: null, rules: [] }
      : await presentActing(em, acting, studyOf(acting))),
    deviceKey: deviceKeyOf(settings.sessionSecret, person.id),
  };
}

/** Made anew at each sign-in and kept nowhere: without it nobody reads what one person left on a shared tablet. */
const deviceKeyOf = (secret: string, personId: string): string =>
  createHmac('sha256', secret).update(`device key ${personId}`).digest('base64');

async function presentActing(
  em: EntityManager,
  membership: Membership,
  study: Study | undefined,
): Promise<Pick<SessionDto, 'acting' | 'rules'>> {
  const limited = membership.siteIds ? { id: { $in: membership.siteIds } } : {};
  const sites = study
    ? await em.find(SiteSchema, { studyId: study.id, ...limited }, { orderBy: { code: 'asc' } })
    : [];
  const unblinded = membership.unblinded || study?.state === 'unblinded';
  const ability = abilityFor({
    personId: membership.personId,
    studyId: membership.studyId ?? null,
    role: membership.role,
    siteIds: membership.siteIds ?? null,
    unblinded,
  });
  return {
    acting: {
      membershipId: membership.id,
      studyCode: study?.code ?? null,
      studyName: study?.name ?? null,
      studyState: study?.state ?? null,
      role: membership.role,
      sites: sites.map(({ id, code, name, timeZone }) => ({ id, code, name, timeZone })),
      unblinded,
    },
    rules: packRules(ability.rules),
  };
}
