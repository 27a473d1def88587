import type { EntityManager } from '@mikro-orm/postgresql';
import { parseParticipantCode } from '#schemas/participants/participant-code.ts';
import type { ParticipantState } from '#schemas/vocabulary/states.ts';
import { accessible } from '#backend/database/row-filter.ts';
import { currentStudyId } from '#backend/http/actor.ts';
import { assertReadable } from '#backend/http/authorize.ts';
import { fromCursor, pageSize, toCursor } from '#backend/http/list.ts';
import { Problem } from '#backend/http/problem.ts';
import { ParticipantSchema, type Participant } from './participant.entity.ts';

/** The participant, when the actor may know of it; 404 otherwise. */
export async function readableParticipant(em: EntityManager, id: string): Promise<Participant> {
  return readable(await em.findOne(ParticipantSchema, { id, studyId: currentStudyId() }));
}

/** The participant with this code, as people type it; a slip is told from a participant who is not there. */
export async function participantByCode(em: EntityManager, typed: string): Promise<Participant> {
  const parsed = parseParticipantCode(typed);
  if (parsed === null) {
    throw new Problem(
      400,
      'invalid-parameter',
      'This is not a participant code: compare its letters and digits.',
    );
  }
  return readable(await em.findOne(ParticipantSchema, { code: parsed.code, studyId: currentStudyId() }));
}

function readable(participant: Participant | null): Participant {
  assertReadable('Participant', participant, 'This participant');
  return participant!;
}

export interface ParticipantQuery {
  site?: string;
  state?: ParticipantState;
  code?: string;
  cursor?: string;
  limit?: string;
}

/** Participants by code, a page at a time; only those the actor may know of. */
export async function listParticipants(
  em: EntityManager,
  query: ParticipantQuery,
): Promise<{ rows: Participant[]; nextCursor: string | null }> {
  const allowed = accessible('read', 'Participant');
  if (allowed === null) return { rows: [], nextCursor: null };
  const after = fromCursor(query.cursor, 1);
  const limit = pageSize(query.limit);
  const found = await em.find(
    ParticipantSchema,
    {
      $and: [
        allowed,
        query.site === undefined ? {} : { siteId: query.site },
        query.state === undefined ? {} : { state: query.state },
        query.code === undefined ? {} : { code: { $like: `${query.code.toUpperCase()}%` } },
        after === null ? {} : { code: { $gt: String(after[0]) } },
      ],
    },
    { orderBy: { code: 'asc' }, limit: limit + 1 },
  );
  const rows = found.slice(0, limit);
  return { rows, nextCursor: found.length > limit ? toCursor([rows.at(-1)!.code]) : null };
}
