import { createMongoAbility, subject } from '@casl/ability';
import { unpackRules, type PackRule } from '@casl/ability/extra';
import { createContext, useContext } from 'react';
import {
  noAbility,
  type Action,
  type AppAbility,
  type AppRule,
  type SubjectName,
} from '#schemas/abilities/ability.ts';

export const AbilityContext = createContext<AppAbility>(noAbility());

/** The ability that the server's packed rules describe. It shows or hides; the server decides. */
export const abilityFrom = (rules: unknown[]): AppAbility =>
  createMongoAbility<AppAbility>(unpackRules(rules as PackRule<AppRule>[]));

/**
 * Asks what the actor may do: about a loaded row, or without one "at least one such thing?".
 *
 * @example const may = useMay(); may('complete', 'Entry', entry)
 */
export function useMay(): (action: Action, name: SubjectName, row?: object) => boolean {
  const ability = useContext(AbilityContext);
  // CASL writes its mark on the row it is asked about; a copy keeps the query cache untouched.
  return (action, name, row) =>
    ability.can(action, row === undefined ? name : (subject(name, { ...row }) as never));
}
