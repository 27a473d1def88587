import { noAbility } from '#schemas/abilities/ability.ts';
import type { Actor } from '#backend/http/actor.ts';

/** The system at work on a study's job: it may read all of it, and the trail names it. */
export const systemActor = (studyId: string): Actor => ({
  personId: null,
  name: 'the system',
  membershipId: null,
  role: 'system',
  studyId,
  siteIds: null,
  unblinded: true,
  ability: noAbility(),
});
