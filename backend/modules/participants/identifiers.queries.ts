import type { EntityManager } from '@mikro-orm/postgresql';
import type { IdentifiersReadingDto } from '#schemas/api/participants.ts';
import { may } from '#backend/http/authorize.ts';
import { fromCursor, pageSize, toCursor } from '#backend/http/list.ts';
import { notAllowed } from '#backend/http/problem.ts';
import { readableParticipant } from './participant.queries.ts';

interface ReadingRow {
  sequence: string;
  at: string;
  by: string | null;
  role: string;
  reason: string | null;
}

/** Who has seen a participant's identifiers, newest first (CP-05, CP-08); for those who may see them too. */
export async function listIdentifiersReadings(
  em: EntityManager,
  participantId: string,
  query: { cursor?: string; limit?: string },
): Promise<{ items: IdentifiersReadingDto[]; nextCursor: string | null }> {
  const { studyId, siteId } = await readableParticipant(em, participantId);
  const about = { studyId, siteId };
  if (!may('read', 'DirectIdentifiers', about) && !may('open', 'DirectIdentifiers', about)) {
    throw notAllowed('Who has seen identifiers is shown to those who may see them.');
  }
  const before = fromCursor(query.cursor, 1);
  const limit = pageSize(query.limit);
  const rows = await em.execute<ReadingRow[]>(
    `select event.sequence, event.at, person.name as by, event.role, reason.value #>> '{}' as reason
       from audit_event event
       left join person on person.id = event.actor_id
       left join recorded_value reason on reason.study_id = event.study_id and reason.sequence = event.sequence
                                      and reason.address = '/reason'
      where event.study_id = ? and event.subject = ? and event.kind = 'identifiers-read'
        and event.sequence < ?::bigint
      order by event.sequence desc limit ?`,
    [studyId, `direct-identifiers/${participantId}`, before?.[0] ?? '9223372036854775807', limit + 1],
  );
  const page = rows.slice(0, limit);
  return {
    items: page.map(({ at, by, role, reason }) => ({
      at: new Date(at).toISOString(),
      by: by ?? 'the system',
      role,
      reason,
    })),
    nextCursor: rows.length > limit ? toCursor([page.at(-1)!.sequence]) : null,
  };
}
