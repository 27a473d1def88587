import { AsyncLocalStorage } from 'node:async_hooks';
import type { AppAbility } from '#schemas/abilities/ability.ts';
import type { Role } from '#schemas/vocabulary/roles.ts';

/** Who does what is being done, as which role, in which study. */
export interface Actor {
  /** Null for the system itself. */
  personId: string | null;
  name: string;
  membershipId: string | null;
  role: Role | 'system' | 'signed-in';
  studyId: string | null;
  /** Null means all sites. */
  siteIds: readonly string[] | null;
  /** May see unblinding values: by membership, or because the study has been unblinded. */
  unblinded: boolean;
  ability: AppAbility;
}

const storage = new AsyncLocalStorage<Actor>();

/** Runs `work` as this actor; set once a request or a job. */
export const runAs = <T>(actor: Actor, work: () => T): T => storage.run(actor, work);

/** The actor; throws where none was set, so that nothing is ever done by nobody. */
export function currentActor(): Actor {
  const actor = storage.getStore();
  if (actor === undefined) throw new Error('Nobody is acting.');
  return actor;
}

/** The actor's study; throws for an act that needs one and has none. */
export function currentStudyId(): string {
  const { studyId } = currentActor();
  if (studyId === null) throw new Error('This act belongs to a study.');
  return studyId;
}

/** The person acting; throws for the system. */
export function currentPersonId(): string {
  const { personId } = currentActor();
  if (personId === null) throw new Error('This act needs a person.');
  return personId;
}
