import type { EntityManager } from '@mikro-orm/postgresql';
import type { ActContext } from './act-context.ts';
import { eventHash, genesis, type EventForm } from './event-form.ts';

interface Head {
  sequence: string;
  hash: string;
  at: string;
}

/** Takes the chain's lock, then reads its head in a statement of its own, so that it sees the newest. */
async function lockedHead(tx: EntityManager, studyId: string): Promise<Head> {
  await tx.execute('select pg_advisory_xact_lock(hashtextextended(?, 0))', [studyId]);
  const [head] = await tx.execute<Head[]>(
    `select coalesce(last.sequence, 0) as sequence, coalesce(encode(last.hash, 'hex'), ?) as hash,
            to_char(clock_timestamp() at time zone 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"') as at
       from (select 1) as one
       left join lateral (select sequence, hash from audit_event where study_id = ?
                           order by sequence desc limit 1) as last on true`,
    [genesis, studyId],
  );
  if (head === undefined) throw new Error('The chain has no head.');
  return head;
}

/** Writes values, revisions, the idempotency key and the one event, as the transaction's last statement. */
export async function writeEvent(
  tx: EntityManager,
  context: ActContext,
  event: Omit<EventForm, 'sequence' | 'at' | 'previous'>,
  key: { personId: string; key: string; bodyHash: string } | null,
): Promise<number> {
  const head = await lockedHead(tx, event.study);
  const form: EventForm = {
    ...event,
    sequence: Number(head.sequence) + 1,
    at: head.at,
    previous: head.hash,
  };
  const values = context.values.map((value) => ({
    id: value.id,
    subject_type: value.subjectType,
    subject_id: value.subjectId,
    address: value.address,
    level: value.level,
    salt: value.salt.toString('hex'),
    value: value.value,
    written: value.written,
    derivation: value.derivation,
    commitment: value.commitment,
  }));
  const revisions = context.revisions.map((revision) => ({
    entry_id: revision.entryId,
    revision: revision.revision,
    content_hash: revision.contentHash,
    changes: revision.changes,
  }));
  await tx.execute(
    `with event as (
       insert into audit_event (study_id, sequence, at, actor_id, membership_id, role, kind, subject, participant_id,
                                site_id, changes, reason, cause, version, previous_hash, hash)
       values (?, ?, ?::timestamptz, ?, ?, ?, ?, ?, ?, ?, ?::jsonb, ?, ?, ?, decode(?, 'hex'), decode(?, 'hex'))
       returning study_id, sequence, at, actor_id
     ), vals as (
       insert into recorded_value (study_id, id, sequence, subject_type, subject_id, address, level, salt, value,
                                   written, derivation, commitment)
       select event.study_id, v.id, event.sequence, v.subject_type, v.subject_id, v.address, v.level,
              decode(v.salt, 'hex'), v.value, v.written, v.derivation, decode(v.commitment, 'hex')
         from event, jsonb_to_recordset(?::jsonb) as v(id uuid, subject_type text, subject_id uuid, address text,
              level text, salt text, value jsonb, written text, derivation jsonb, commitment text)
     ), revs as (
       insert into entry_revision (study_id, entry_id, revision, sequence, content_hash, changes)
       select event.study_id, r.entry_id, r.revision, event.sequence, decode(r.content_hash, 'hex'), r.changes
         from event, jsonb_to_recordset(?::jsonb) as r(entry_id uuid, revision int, content_hash text, changes jsonb)
     )
     insert into idempotency_key (person_id, key, body_hash, study_id, sequence, at)
     select ?::uuid, ?, ?, event.study_id, event.sequence, event.at from event where ?::text is not null`,
    [
      form.study,
      form.sequence,
      form.at,
      form.actor,
      form.membership,
      form.role,
      form.kind,
      form.subject,
      form.participant,
      form.site,
      JSON.stringify(form.changes),
      form.reason,
      form.cause,
      form.version,
      form.previous,
      eventHash(form),
      JSON.stringify(values),
      JSON.stringify(revisions),
      key?.personId ?? null,
      key?.key ?? null,
      key?.bodyHash ?? null,
      key?.key ?? null,
    ],
  );
  return form.sequence;
}
