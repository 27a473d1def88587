import { RequestContext, type MikroORM } from '@mikro-orm/postgresql';
import { abilityFor, noAbility, type MembershipFacts } from '#schemas/abilities/ability.ts';
import { runAs, type Actor } from '#backend/http/actor.ts';

/** The system itself, as jobs and seeders act. */
export const theSystem: Actor = {
  personId: null,
  name: 'the system',
  membershipId: null,
  role: 'system',
  studyId: null,
  siteIds: null,
  unblinded: false,
  ability: noAbility(),
};

/** Someone with these facts, for tests below HTTP. */
export const someone = (facts: MembershipFacts, membershipId: string | null = null): Actor => ({
  ...facts,
  name: facts.role,
  membershipId,
  ability: abilityFor(facts),
});

/** Runs work as an actor with an entity manager of its own, as a request would. */
export const acting = <T>(orm: MikroORM, actor: Actor, work: () => Promise<T>): Promise<T> =>
  RequestContext.create(orm.em, () => runAs(actor, work));
