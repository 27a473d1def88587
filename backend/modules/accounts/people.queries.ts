import type { EntityManager, FilterQuery } from '@mikro-orm/postgresql';
import { roles } from '#schemas/vocabulary/roles.ts';
import type { MemberDto, PersonDto } from '#schemas/api/people.ts';
import { fromCursor, pageSize, toCursor } from '#backend/http/list.ts';
import { notFound } from '#backend/http/problem.ts';
import { SiteSchema } from '../studies/site.entity.ts';
import { StudySchema } from '../studies/study.entity.ts';
import { MembershipSchema, type Membership } from './membership.entity.ts';
import { presentMember, presentPerson, type MembershipContext } from './people.presenter.ts';
import { PersonSchema, type Person } from './person.entity.ts';

export interface PeopleQuery {
  cursor?: string;
  limit?: string;
  /** A part of the name or the address, taken literally. */
  search?: string;
  status?: Person['status'];
}

export interface Page<T> {
  items: T[];
  nextCursor: string | null;
}

/** People by name, a page at a time, each with the memberships held now. */
export async function listPeople(em: EntityManager, query: PeopleQuery): Promise<Page<PersonDto>> {
  const size = pageSize(query.limit);
  const [name, id] = (fromCursor(query.cursor, 2) ?? []).map(String);
  const where: FilterQuery<Person>[] = [];
  if (name !== undefined && id !== undefined)
    where.push({ $or: [{ name: { $gt: name } }, { name, id: { $gt: id } }] });
  if (query.status !== undefined) where.push({ status: query.status });
  if (query.search) {
    const part = { $ilike: `%${query.search.replaceAll(/[\\%_]/g, String.raw`\$&`)}%` };
    where.push({ $or: [{ name: part }, { email: part }] });
  }
  const found = await em.find(
    PersonSchema,
    { $and: where },
    { orderBy: { name: 'asc', id: 'asc' }, limit: size + 1 },
  );
  const people = found.slice(0, size);
  const memberships = await em.find(MembershipSchema, {
    personId: { $in: people.map((person) => person.id) },
    status: 'active',
  });
  const context = await contextOf(em, memberships);
  const last = people.at(-1);
  return {
    items: people.map((person) =>
      presentPerson(person, inOrder(memberships.filter(({ personId }) => personId === person.id)), context),
    ),
    nextCursor: found.length > size && last !== undefined ? toCursor([last.name, last.id]) : null,
  };
}

/** One person with every membership, those revoked too. */
export async function onePerson(em: EntityManager, personId: string): Promise<PersonDto> {
  const person = await em.findOneOrFail(PersonSchema, personId, {
    failHandler: () => notFound('This person'),
  });
  const memberships = await em.find(MembershipSchema, { personId });
  return presentPerson(person, inOrder(memberships), await contextOf(em, memberships));
}

/** Who is and who was a member of a study. */
export async function membersOf(em: EntityManager, where: FilterQuery<Membership>): Promise<MemberDto[]> {
  const memberships = await em.find(MembershipSchema, where);
  const people = await em.find(PersonSchema, { id: { $in: memberships.map(({ personId }) => personId) } });
  const context = await contextOf(em, memberships);
  const byId = new Map(people.map((person) => [person.id, person]));
  return inOrder(memberships)
    .flatMap((row) => {
      const person = byId.get(row.personId);
      return person === undefined ? [] : [presentMember(row, person, context)];
    })
    .sort((a, b) => roles.indexOf(a.role) - roles.indexOf(b.role) || a.name.localeCompare(b.name, 'en'));
}

export async function contextOf(
  em: EntityManager,
  memberships: readonly Membership[],
): Promise<MembershipContext> {
  const studyIds = memberships.flatMap(({ studyId }) => (studyId == null ? [] : [studyId]));
  const siteIds = memberships.flatMap((row) => row.siteIds ?? []);
  const [studies, sites] = [
    await em.find(StudySchema, { id: { $in: studyIds } }),
    await em.find(SiteSchema, { id: { $in: siteIds } }),
  ];
  return {
    studies: new Map(studies.map((row) => [row.id, row])),
    sites: new Map(sites.map((row) => [row.id, row])),
  };
}

/** Those that hold first, then by role. */
const inOrder = (rows: readonly Membership[]): Membership[] =>
  rows.toSorted((a, b) => a.status.localeCompare(b.status) || roles.indexOf(a.role) - roles.indexOf(b.role));
