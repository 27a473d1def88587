import type { EntityManager } from '@mikro-orm/postgresql';
import type { Role } from '#schemas/vocabulary/roles.ts';
import { unblindedByWork } from '#schemas/vocabulary/roles.ts';
import { runAs } from '#backend/http/actor.ts';
import type { Deps } from '#backend/http/deps.ts';
import { asSystem, createPerson, demoAccounts, grantMembership, hashPassword } from '../accounts/index.ts';
import { Player } from './stage.ts';

/** The invented people by the first part of their address. */
export type People = Map<string, string>;

/** Makes one account a person, with the password that the sign-in page of a demo shows. */
export async function makePeople(deps: Deps): Promise<People> {
  const people: People = new Map();
  for (const { email, name, password } of demoAccounts) {
    const passwordHash = await hashPassword(password);
    const person = await asSystemDoes(deps, (em) => createPerson(em, { email, name, passwordHash }));
    people.set(email.split('@')[0] ?? email, person.id);
  }
  return people;
}

/** Runs work as the system, with an entity manager of its own. */
export const asSystemDoes = <T>(deps: Deps, work: (em: EntityManager) => Promise<T>): Promise<T> =>
  runAs(asSystem, () => work(deps.orm.em.fork()));

/** Gives a role in a study, and the player who acts in it. */
export async function cast(
  deps: Deps,
  personId: string | undefined,
  role: Role,
  studyId: string | null,
  siteIds: string[] | null = null,
): Promise<Player> {
  if (personId === undefined) throw new Error('A person of the demo is missing.');
  const unblinded = unblindedByWork.includes(role);
  const membership = await asSystemDoes(deps, (em) =>
    grantMembership(em, { personId, studyId, role, siteIds, unblinded }),
  );
  return new Player(deps, personId, membership.id);
}
