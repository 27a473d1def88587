import pg from 'pg';
import QueryStream from 'pg-query-stream';

/** Rows of a statement, streamed: memory stays flat however long the trail is. */
async function* rows<Row>(client: pg.Client, sql: string): AsyncGenerator<Row> {
  for await (const row of client.query(new QueryStream(sql, [], { batchSize: 500 }))) yield row as Row;
}

const utc = (column: string): string =>
  `to_char(${column} at time zone 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"')`;

/**
 * The lines of a dump: for outsiders commitments only, or the values' file that goes with it.
 * One REPEATABLE READ transaction, so that both files are of one moment.
 */
export async function* dumpLines(url: string, what: 'chain' | 'values' | 'heads'): AsyncGenerator<string> {
  const client = new pg.Client({ connectionString: url });
  await client.connect();
  try {
    await client.query('begin isolation level repeatable read read only');
    if (what === 'chain') {
      yield* asLines('event', rows(client, eventSql));
      yield* asLines('revision', rows(client, revisionSql));
    } else if (what === 'values') yield* asLines('value', rows(client, valueSql));
    else yield* asLines('head', rows(client, headSql));
    await client.query('commit');
  } finally {
    await client.end();
  }
}

async function* asLines(name: string, source: AsyncGenerator<object>): AsyncGenerator<string> {
  for await (const row of source) yield `${JSON.stringify({ [name]: row })}\n`;
}

const eventSql = `
  select study_id as study, sequence::int as sequence, ${utc('at')} as at, actor_id as actor,
         membership_id as membership, role, kind, subject, participant_id as participant, site_id as site,
         changes, reason, cause::int as cause, version, encode(previous_hash, 'hex') as previous,
         encode(hash, 'hex') as hash
    from audit_event order by study_id, sequence`;

const revisionSql = `
  select study_id as study, entry_id as entry, revision, sequence::int as sequence,
         encode(content_hash, 'hex') as "contentHash",
         (select coalesce(jsonb_object_agg(key, value -> 'commitment'), '{}') from jsonb_each(changes)) as changes
    from entry_revision order by study_id, entry_id, revision`;

const valueSql = `
  select study_id as study, id, subject_type || '/' || subject_id as subject, address, sequence::int as sequence,
         encode(salt, 'hex') as salt, value, written, encode(commitment, 'hex') as commitment,
         ${utc('redacted_at')} as "redactedAt"
    from recorded_value order by study_id, sequence, id`;

const headSql = `
  select distinct on (study_id) study_id as study, sequence::int as sequence, encode(hash, 'hex') as hash
    from audit_event order by study_id, sequence desc`;
