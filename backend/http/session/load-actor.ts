import type { EntityManager } from '@mikro-orm/postgresql';
import { abilityFor, noAbility, type MembershipFacts } from '#schemas/abilities/ability.ts';
import type { Role } from '#schemas/vocabulary/roles.ts';
import type { Actor } from '../actor.ts';

interface Row {
  name: string;
  session_epoch: number;
  membership_id: string | null;
  study_id: string | null;
  study_code: string | null;
  role: Role | null;
  site_ids: string[] | null;
  unblinded: boolean | null;
  study_state: string | null;
}

export interface LoadedActor {
  actor: Actor;
  studyCode: string | null;
  sessionEpoch: number;
}

/**
 * Loads who is acting, anew for each request: a right that was revoked is gone with the next one (AC-04).
 * Null when the person may not act at all any more.
 */
export async function loadActor(
  em: EntityManager,
  personId: string,
  membershipId: string | null,
): Promise<LoadedActor | null> {
  const [row] = await em.execute<Row[]>(
    `select person.name, person.session_epoch, membership.id as membership_id, membership.study_id,
            study.code as study_code, study.state as study_state, membership.role, membership.site_ids,
            membership.unblinded
       from person
       left join membership on membership.id = ? and membership.person_id = person.id
                           and membership.status = 'active'
       left join study on study.id = membership.study_id
      where person.id = ? and person.status = 'active'`,
    [membershipId, personId],
  );
  if (row === undefined) return null;
  return { actor: actorOf(personId, row), studyCode: row.study_code, sessionEpoch: row.session_epoch };
}

function actorOf(personId: string, row: Row): Actor {
  if (row.membership_id === null || row.role === null) {
    return {
      personId,
      name: row.name,
      membershipId: null,
      role: 'signed-in',
      studyId: null,
      siteIds: null,
      unblinded: false,
      ability: noAbility(),
    };
  }
  const facts: MembershipFacts = {
    personId,
    studyId: row.study_id,
    role: row.role,
    siteIds: row.site_ids,
    unblinded: row.unblinded === true || row.study_state === 'unblinded',
  };
  return { ...facts, name: row.name, membershipId: row.membership_id, ability: abilityFor(facts) };
}
