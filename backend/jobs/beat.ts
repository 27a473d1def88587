import type { Pool, PoolClient } from 'pg';
import type PgBoss from 'pg-boss';
import { queueSchema } from './queues.ts';

/** Marks a job as alive every few seconds until the returned function is called. */
export function keepBeating(
  pool: Pool,
  jobId: string,
  everySeconds: number,
  onError: (error: unknown) => void,
) {
  const beat = async (): Promise<void> => {
    await pool
      .query(
        'insert into job_beat (job_id) values ($1) on conflict (job_id) do update set at = clock_timestamp()',
        [jobId],
      )
      .catch(onError);
  };
  let last = beat();
  const timer = setInterval(() => (last = beat()), everySeconds * 1000);
  return async () => {
    clearInterval(timer);
    await last; // or it would be written after it was removed
    await pool.query('delete from job_beat where job_id = $1', [jobId]).catch(onError);
  };
}

/**
 * Gives the jobs of dead workers back to the queue; any process may do it, each job is taken by one.
 * A job counts as dead when neither its start nor its last beat is recent.
 */
export async function sweepDeadWorkers(pool: Pool, boss: PgBoss, staleSeconds: number): Promise<number> {
  return inTransaction(pool, async (client) => {
    const { rows } = await client.query<{ id: string; name: string }>(
      `select j.id, j.name from ${queueSchema}.job j left join job_beat b on b.job_id = j.id
       where j.state = 'active' and not starts_with(j.name, '__pgboss')
         and greatest(j.started_on, b.at) < clock_timestamp() - make_interval(secs => $1)
       for update of j skip locked`,
      [staleSeconds],
    );
    const db: PgBoss.Db = { executeSql: (text, values) => client.query(text, values) };
    for (const { id, name } of rows) {
      await failJob(boss, name, id, 'WorkerLost', { db });
      await client.query('delete from job_beat where job_id = $1', [id]);
    }
    return rows.length;
  });
}

/** Ends a try. Only the error's kind is kept with the job: its message may hold data. */
export async function failJob(
  boss: PgBoss,
  name: string,
  id: string,
  kind: string,
  options: PgBoss.ConnectionOptions = {},
): Promise<void> {
  const fail = boss.fail.bind(boss) as (
    name: string,
    id: string,
    data: object,
    options: PgBoss.ConnectionOptions,
  ) => Promise<void>;
  await fail(name, id, { kind }, options);
}

async function inTransaction<T>(pool: Pool, work: (client: PoolClient) => Promise<T>): Promise<T> {
  const client = await pool.connect();
  let broken: Error | undefined;
  // A connection that breaks while it is ours says so outside any query, and unheard that would end the process.
  const noteBroken = (error: Error) => (broken = error);
  client.on('error', noteBroken);
  try {
    await client.query('begin');
    const result = await work(client);
    await client.query('commit');
    return result;
  } catch (error) {
    await client.query('rollback').catch(noteBroken);
    throw error;
  } finally {
    client.off('error', noteBroken);
    client.release(broken);
  }
}
