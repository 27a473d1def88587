import type { HeldMembershipDto, MemberDto, PersonDto } from '#schemas/api/people.ts';
import type { Site } from '../studies/site.entity.ts';
import type { Study } from '../studies/study.entity.ts';
import type { Membership } from './membership.entity.ts';
import type { Person } from './person.entity.ts';

/** What the memberships refer to, by id. */
export interface MembershipContext {
  studies: ReadonlyMap<string, Study>;
  sites: ReadonlyMap<string, Site>;
}

const fields = (row: Membership, { sites }: MembershipContext) => {
  const siteIds = row.siteIds ?? null;
  return {
    id: row.id,
    role: row.role,
    siteIds,
    siteCodes: siteIds && siteIds.map((id) => sites.get(id)?.code ?? '??'),
    unblinded: row.unblinded,
    status: row.status,
    revision: row.revision,
  };
};

export function presentHeldMembership(row: Membership, context: MembershipContext): HeldMembershipDto {
  const study = row.studyId == null ? undefined : context.studies.get(row.studyId);
  return { ...fields(row, context), studyCode: study?.code ?? null, studyName: study?.name ?? null };
}

export const presentMember = (row: Membership, person: Person, context: MembershipContext): MemberDto => ({
  ...fields(row, context),
  personId: person.id,
  name: person.name,
  email: person.email,
  personStatus: person.status,
});

export const presentPerson = (
  person: Person,
  memberships: readonly Membership[],
  context: MembershipContext,
): PersonDto => ({
  id: person.id,
  name: person.name,
  email: person.email,
  status: person.status,
  declarationAcceptedAt: person.declarationAcceptedAt?.toISOString() ?? null,
  revision: person.revision,
  memberships: memberships.map((row) => presentHeldMembership(row, context)),
});
