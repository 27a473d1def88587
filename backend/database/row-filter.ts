import { rulesToCondition } from '@casl/ability/extra';
import type { Action, SubjectName } from '#schemas/abilities/ability.ts';
import { currentActor } from '../http/actor.ts';

type Where = Record<string, unknown>;

/**
 * MikroORM `where` for the rows on which the actor may do this; null means none at all,
 * and the caller answers with an empty list without asking the database.
 */
export function accessible(action: Action, type: SubjectName): Where | null {
  const { ability } = currentActor();
  return rulesToCondition(
    ability.rulesFor(action, type),
    (rule) => (rule.inverted ? { $not: rule.conditions as Where } : (rule.conditions as Where)),
    { and: (all) => ({ $and: all }), or: (any) => ({ $or: any }), empty: (): Where => ({}) },
  );
}
