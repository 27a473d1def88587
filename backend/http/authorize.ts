import { subject as asSubject } from '@casl/ability';
import type { Action, SubjectName } from '#schemas/abilities/ability.ts';
import { currentActor } from './actor.ts';
import { notAllowed, notFound } from './problem.ts';

/** Whether the actor may do this to this loaded row. */
export const may = (action: Action, type: SubjectName, row: object): boolean =>
  currentActor().ability.can(action, asSubject(type, { ...row }) as never);

/** What may not be known of answers as what is not there: 404 (`architecture.md` 5). */
export function assertReadable(type: SubjectName, row: object | null | undefined, what?: string): void {
  if (row === null || row === undefined || !may('read', type, row)) throw notFound(what);
}

/** After the assertion the actor may do this to the loaded row; otherwise 403 with the way out. */
export function authorize(action: Action, type: SubjectName, row: object, detail?: string): void {
  if (may(action, type, row)) return;
  throw notAllowed(detail ?? `As ${currentActor().role.replaceAll('-', ' ')} you may not do this here.`);
}
