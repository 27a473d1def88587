import { noAbility } from '#schemas/abilities/ability.ts';
import type { Actor } from '#backend/http/actor.ts';
import type { Person } from './person.entity.ts';

/** The person in no study and no role: at sign-in, and when a one-time link is taken up. */
export const asPerson = ({ id, name }: Pick<Person, 'id' | 'name'>): Actor => ({
  personId: id,
  name,
  membershipId: null,
  role: 'signed-in',
  studyId: null,
  siteIds: null,
  unblinded: false,
  ability: noAbility(),
});

/** The system itself: what nobody who is signed in has done. */
export const asSystem: Actor = { ...asPerson({ id: '', name: 'System' }), personId: null, role: 'system' };
