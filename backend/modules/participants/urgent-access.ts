import type { EntityManager } from '@mikro-orm/postgresql';
import { currentActor, currentPersonId, currentStudyId } from '#backend/http/actor.ts';

const minutes = 15;

/**
 * When the actor's running urgent access to this participant ends (AC-07); null when none is running. It is read from the
 * trail: the last look with a reason opened it, and nothing has to be closed.
 */
export async function urgentAccessUntil(em: EntityManager, participantId: string): Promise<Date | null> {
  const [last] = await em.execute<{ at: string }[]>(
    `select at from audit_event
      where study_id = ? and subject = ? and kind = 'identifiers-read' and actor_id = ? and role = ?
        and reason is not null
      order by sequence desc limit 1`,
    [currentStudyId(), `direct-identifiers/${participantId}`, currentPersonId(), currentActor().role],
  );
  if (last === undefined) return null;
  const until = new Date(new Date(last.at).getTime() + minutes * 60_000);
  return until.getTime() > Date.now() ? until : null;
}
