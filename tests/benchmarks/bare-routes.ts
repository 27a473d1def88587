import express from 'express';
import { createHash, randomBytes, randomUUID } from 'node:crypto';
import pg from 'pg';
import { eventHash, genesis } from '#backend/database/trail/event-form.ts';
import { listen } from '#backend/web-server.ts';
import type { StudyWithEntries } from './a-study-with-entries.ts';

/**
 * What saving a reading is compared with, on the same database: `/by-hand/:entryId` sends the statements of the
 * product's own save, written out over `pg`; `/insert/:entryId` sends one INSERT and nothing else.
 */
export async function startBareRoutes(databaseUrl: string, study: StudyWithEntries) {
  const pool = new pg.Pool({ connectionString: databaseUrl, max: 10 });
  const app = express();
  app.use(express.json());
  app.patch('/by-hand/:entryId', async (request, response) => {
    const client = await pool.connect();
    try {
      response.json(await saveByHand(client, study, request.params['entryId'], request.body as Body));
    } finally {
      client.release();
    }
  });
  app.patch('/insert/:entryId', async (request, response) => {
    const { value } = request.body as Body;
    await pool.query(insertValue, [
      study.studyId,
      randomUUID(),
      0,
      request.params['entryId'],
      randomBytes(32),
      value,
      null,
      randomBytes(32),
    ]);
    response.json({ value });
  });
  const web = await listen('127.0.0.1', 0);
  web.serve(app);
  return {
    origin: web.origin,
    stop: async () => {
      await web.close();
      await pool.end();
    },
  };
}

interface Body {
  value: number;
}

const insertValue = `insert into recorded_value (study_id, id, sequence, subject_type, subject_id, address, level, salt,
  value, written, derivation, commitment)
  values ($1, $2, $3, 'entry-value', $4, '/systolic/0', 'open', $5, to_jsonb($6::int), $7, null, $8)`;

async function saveByHand(client: pg.PoolClient, study: StudyWithEntries, entryId: string, { value }: Body) {
  const { studyId, coordinator } = study;
  const one = async <Row extends pg.QueryResultRow>(
    sql: string,
    params: unknown[],
  ): Promise<Row | undefined> => (await client.query<Row>(sql, params)).rows[0];
  const entrySql = 'select * from entry where study_id = $1 and id = $2';
  const valuesSql = `select id, address, value, written, derivation, redacted_at from recorded_value
    where study_id = $1 and id = any($2::uuid[])`;

  await one('select sess from session where sid = $1 and expire >= now()', ['bare']);
  await one(
    `select person.name, person.session_epoch, membership.id, membership.role, membership.site_ids, study.state
       from person left join membership on membership.id = $1 and membership.person_id = person.id
                                       and membership.status = 'active'
       left join study on study.id = membership.study_id
      where person.id = $2 and person.status = 'active'`,
    [coordinator.membershipId, coordinator.personId],
  );
  const entry = await one<Entry>(entrySql, [studyId, entryId]);
  if (entry === undefined) throw new Error('The entry is gone.');
  await client.query(valuesSql, [studyId, Object.values(entry.content).map((item) => item.value)]);
  await one('select body_hash from idempotency_key where person_id = $1 and key = $2', [
    coordinator.personId,
    randomUUID(),
  ]);

  await client.query('begin transaction isolation level read committed');
  await one('select state from study where id = $1 for share', [studyId]);
  await client.query(
    `select * from verification_mark where study_id = $1 and entry_id = $2 and address = any($3) and fallen_at is null`,
    [studyId, entryId, ['/systolic/0']],
  );
  const salt = randomBytes(32);
  const item = { value: randomUUID(), commitment: sha256(salt, JSON.stringify(value), '\0') };
  const content = { ...entry.content, '/systolic/0': item };
  const contentHash = sha256(JSON.stringify({ '/systolic/0': item.commitment }));
  await one(
    `update entry set content = $1, content_hash = $2, revision = revision + 1
      where study_id = $3 and id = $4 and revision = $5 returning revision`,
    [JSON.stringify(content), contentHash, studyId, entryId, entry.revision],
  );
  await client.query('select pg_advisory_xact_lock(hashtextextended($1, 0))', [studyId]);
  const head = await one<{ sequence: number; hash: string; at: string }>(
    `select sequence::int, encode(hash, 'hex') as hash,
            to_char(clock_timestamp() at time zone 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"') as at
       from audit_event where study_id = $1 order by sequence desc limit 1`,
    [studyId],
  );
  const form = {
    study: studyId,
    sequence: (head?.sequence ?? 0) + 1,
    at: head?.at ?? new Date().toISOString(),
    actor: coordinator.personId,
    membership: coordinator.membershipId,
    role: 'coordinator',
    kind: 'entry-saved',
    subject: `entry/${entryId}`,
    participant: entry.participant_id,
    site: entry.site_id,
    changes: [{ subject: `entry-value/${entryId}`, address: '/systolic/0', old: null, new: item.commitment }],
    reason: null,
    cause: null,
    version: 'bare',
    previous: head?.hash ?? genesis,
  };
  await client.query(
    `with event as (
       insert into audit_event (study_id, sequence, at, actor_id, membership_id, role, kind, subject, participant_id,
                                site_id, changes, version, previous_hash, hash)
       values ($1, $2, $3, $4, $5, $6, $7, $8, $9, $10, $11, $12, decode($13, 'hex'), decode($14, 'hex'))
     ), vals as (
       insert into recorded_value (study_id, id, sequence, subject_type, subject_id, address, level, salt, value,
                                   commitment)
       values ($1, $15, $2, 'entry-value', $16, '/systolic/0', 'open', $17, $18, decode($19, 'hex'))
     ), revs as (
       insert into entry_revision (study_id, entry_id, revision, sequence, content_hash, changes)
       values ($1, $16, $20, $2, decode($21, 'hex'), $22)
     )
     insert into idempotency_key (person_id, key, body_hash, study_id, sequence, at)
     values ($4, $23, $21, $1, $2, $3)`,
    [
      studyId,
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
      form.version,
      form.previous,
      eventHash(form),
      item.value,
      entryId,
      salt,
      JSON.stringify(value),
      item.commitment,
      entry.revision + 1,
      contentHash,
      JSON.stringify({ '/systolic/0': item }),
      randomUUID(),
    ],
  );
  await client.query('commit');

  const stored = await one<Entry>(entrySql, [studyId, entryId]);
  await client.query(valuesSql, [studyId, [item.value]]);
  await one('select * from participant where id = $1', [entry.participant_id]);
  await client.query(
    `select * from check_outcome where study_id = $1 and entry_id = $2 and outcome = 'confirmed'`,
    [studyId, entryId],
  );
  await client.query('update session set expire = now() where sid = $1', ['bare']);
  return stored;
}

interface Entry {
  content: Record<string, { value: string; commitment: string }>;
  revision: number;
  participant_id: string;
  site_id: string;
}

const sha256 = (...parts: (string | Buffer)[]): string =>
  parts.reduce((hash, part) => hash.update(part), createHash('sha256')).digest('hex');
