import type { EntityManager } from '@mikro-orm/postgresql';
import type { TrailEventDto, TrailValue } from '#schemas/api/records.ts';
import { actKinds, type ActKind } from '#schemas/vocabulary/act-kinds.ts';
import { systemChain } from '#backend/database/act.ts';
import { currentActor } from '#backend/http/actor.ts';
import { fromCursor, pageSize, toCursor } from '#backend/http/list.ts';
import { notFound } from '#backend/http/problem.ts';

export interface TrailFilter {
  kind?: string;
  person?: string;
  participant?: string;
  subject?: string;
  from?: string;
  to?: string;
  cursor?: string;
  limit?: string;
}

interface EventRow {
  sequence: string;
  at: string;
  actor: string | null;
  role: string;
  kind: string;
  subject: string;
  participant_code: string | null;
  site_code: string | null;
  reason: string | null;
  cause: string | null;
  version: string;
  hash: string;
  changes: { subject: string; address: string; old: string | null; new: string | null }[];
}

/** Kinds that a statistician may read: cuts, plans, runs, exports. */
const analysisKinds = Object.keys(actKinds).filter((kind) => /^(plan|cut|run|job|export)-/.test(kind));

/** What of the chain the actor may read, as conditions; 404 for those who may read none of it. */
function scope(): { studyId: string; conditions: string[]; parameters: unknown[] } {
  const { role, studyId, siteIds } = currentActor();
  if (role === 'administrator') return { studyId: systemChain, conditions: [], parameters: [] };
  if (studyId === null) throw notFound('This trail');
  if (role === 'statistician') {
    return {
      studyId,
      conditions: ['event.kind = any(?::text[])'],
      parameters: [`{${analysisKinds.join(',')}}`],
    };
  }
  if (role !== 'principal-investigator' && role !== 'monitor') throw notFound('This trail');
  if (siteIds === null) return { studyId, conditions: [], parameters: [] };
  return {
    studyId,
    conditions: ['(event.site_id is null or event.site_id = any(?::uuid[]))'],
    parameters: [`{${siteIds.join(',')}}`],
  };
}

/** The trail, newest first, a page at a time; each value as far as the reader may know it (AT-08). */
export async function listTrail(
  em: EntityManager,
  filter: TrailFilter,
): Promise<{ items: TrailEventDto[]; nextCursor: string | null }> {
  const { studyId, conditions, parameters } = scope();
  const add = (condition: string, value: unknown): void => {
    if (value === undefined) return;
    conditions.push(condition);
    parameters.push(value);
  };
  add('event.kind = ?', filter.kind);
  add('event.actor_id = ?', filter.person);
  add('event.participant_id = ?', filter.participant);
  add('event.subject = ?', filter.subject);
  add('event.at >= ?::timestamptz', filter.from);
  add('event.at <= ?::timestamptz', filter.to);
  add('event.sequence < ?', fromCursor(filter.cursor, 1)?.[0]);
  const limit = pageSize(filter.limit);
  const rows = await em.execute<EventRow[]>(
    `select event.sequence, to_char(event.at at time zone 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"') as at,
            person.name as actor, event.role, event.kind, event.subject, participant.code as participant_code,
            site.code as site_code, event.reason, event.cause, event.version, encode(event.hash, 'hex') as hash,
            event.changes
       from audit_event as event
       left join person on person.id = event.actor_id
       left join participant on participant.id = event.participant_id
       left join site on site.id = event.site_id
      where ${['event.study_id = ?', ...conditions].join(' and ')}
      order by event.sequence desc limit ?`,
    [studyId, ...parameters, limit + 1],
  );
  const page = rows.slice(0, limit);
  const values = await valuesOf(em, studyId, page);
  const last = page.at(-1);
  return {
    items: page.map((row) => present(row, values)),
    nextCursor: rows.length > limit && last ? toCursor([Number(last.sequence)]) : null,
  };
}

interface ValueRow {
  commitment: string;
  level: 'open' | 'unblinding';
  value: unknown;
  written: string | null;
  redacted_at: string | null;
}

async function valuesOf(
  em: EntityManager,
  studyId: string,
  rows: readonly EventRow[],
): Promise<Map<string, TrailValue>> {
  const wanted = rows.flatMap(({ changes, reason }) => [
    ...changes.flatMap((change) => [change.old, change.new]),
    reason,
  ]);
  const commitments = [...new Set(wanted.filter((one) => one !== null))];
  if (commitments.length === 0) return new Map();
  const subjects = [
    ...new Set(rows.flatMap(({ changes, subject }) => [subject, ...changes.map((one) => one.subject)])),
  ];
  const found = await em.execute<ValueRow[]>(
    `select encode(commitment, 'hex') as commitment, level, value, written, redacted_at from recorded_value
      where study_id = ? and subject_id = any(?::uuid[]) and encode(commitment, 'hex') = any(?::text[])`,
    [studyId, `{${subjects.map((one) => one.split('/')[1]).join(',')}}`, `{${commitments.join(',')}}`],
  );
  const { unblinded } = currentActor();
  return new Map(
    found.map(({ commitment, level, value, written, redacted_at: redactedAt }) => [
      commitment,
      level === 'unblinding' && !unblinded
        ? { hidden: true }
        : redactedAt === null
          ? { value, ...(written === null ? {} : { written }) }
          : { redacted: true },
    ]),
  );
}

function present(row: EventRow, values: ReadonlyMap<string, TrailValue>): TrailEventDto {
  const valueOf = (commitment: string | null): TrailValue =>
    commitment === null ? null : (values.get(commitment) ?? { hidden: true });
  const reason = valueOf(row.reason);
  return {
    sequence: Number(row.sequence),
    at: row.at,
    actor: row.actor ?? 'the system',
    role: row.role,
    kind: row.kind,
    words: actKinds[row.kind as ActKind] ?? row.kind,
    subject: row.subject,
    participantCode: row.participant_code,
    siteCode: row.site_code,
    reason: reason !== null && 'value' in reason ? String(reason.value) : reason === null ? null : 'redacted',
    cause: row.cause === null ? null : Number(row.cause),
    version: row.version,
    hash: row.hash,
    changes: row.changes.map((change) => ({
      subject: change.subject,
      address: change.address,
      before: valueOf(change.old),
      after: valueOf(change.new),
    })),
  };
}
