import { createMongoAbility } from '@casl/ability';
import { rulesOfRole } from './roles.ts';
import type { AppAbility, MembershipFacts } from './rule.ts';

export type { Action, AppAbility, AppRule, MembershipFacts, SubjectName } from './rule.ts';

/** One ability per membership, the same on the server and in the client. */
export const abilityFor = (membership: MembershipFacts): AppAbility =>
  createMongoAbility<AppAbility>(rulesOfRole(membership));

/** The ability of someone who acts in no study: none. */
export const noAbility = (): AppAbility => createMongoAbility<AppAbility>([]);
