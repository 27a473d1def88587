import type { EntityManager } from '@mikro-orm/postgresql';
import type { Pool } from 'pg';

type ProgressState = 'queued' | 'running' | 'done' | 'failed' | 'cancelled';

/** How far a job is that a person waits for; `detail` names the stage and carries no data. */
export interface Progress {
  jobKey: string;
  done: number;
  total: number | null;
  state: ProgressState;
  detail: string | null;
  cancelRequested: boolean;
  updatedAt: Date;
}

/** Thrown inside a handler once somebody asked to cancel; the handler lets it pass. */
export class JobCancelled extends Error {
  override name = 'JobCancelled';
}

/** Opens the progress of a job, in the transaction that sends it. */
export async function openProgress(tx: EntityManager, jobKey: string): Promise<void> {
  await tx.execute('insert into job_progress (job_key) values (?)', [jobKey]);
}

/** The present progress, or null when there is no such job. */
export async function readProgress(em: EntityManager, jobKey: string): Promise<Progress | null> {
  const sql = 'select * from job_progress where job_key = ?';
  const [row] = await em.execute<ProgressRow[]>(sql, [jobKey]);
  return row ? present(row) : null;
}

/** Asks a job to stop at its next report; false when it has already ended. */
export async function requestCancel(tx: EntityManager, jobKey: string): Promise<boolean> {
  const asked = await tx.execute<{ job_key: string }[]>(
    `update job_progress set cancel_requested = true, updated_at = clock_timestamp()
     where job_key = ? and state in ('queued', 'running') returning job_key`,
    [jobKey],
  );
  return asked.length > 0;
}

/** Marks the progress of a job that has used up its tries. */
export async function failProgress(tx: EntityManager, jobKey: string): Promise<void> {
  await tx.execute(
    `update job_progress set state = 'failed', updated_at = clock_timestamp() where job_key = ?`,
    [jobKey],
  );
}

/** What the worker writes; each answer tells whether somebody asked to cancel. */
export interface ProgressWriter {
  state: (state: ProgressState) => Promise<boolean>;
  /** @throws JobCancelled */
  report: (done: number, total?: number, detail?: string) => Promise<void>;
}

const quietMilliseconds = 250;

/** Writes a job's progress; without a key there is nothing to write. */
export function progressWriter(pool: Pool, jobKey: string | undefined): ProgressWriter {
  let last = 0;
  async function write(assignments: string, values: unknown[]): Promise<boolean> {
    if (jobKey === undefined) return false;
    const { rows } = await pool.query<{ cancel_requested: boolean }>(
      `update job_progress set ${assignments}, updated_at = clock_timestamp()
       where job_key = $1 returning cancel_requested`,
      [jobKey, ...values],
    );
    return rows[0]?.cancel_requested ?? false;
  }
  return {
    state: (state) => write('state = $2', [state]),
    report: async (done, total, detail) => {
      // A handler reports row by row; the table need not hear of each.
      if (done !== total && Date.now() - last < quietMilliseconds) return;
      last = Date.now();
      const cancelled = await write('done = $2, total = $3, detail = $4', [
        done,
        total ?? null,
        detail ?? null,
      ]);
      if (cancelled) throw new JobCancelled();
    },
  };
}

interface ProgressRow {
  job_key: string;
  done: number;
  total: number | null;
  state: ProgressState;
  detail: string | null;
  cancel_requested: boolean;
  updated_at: string | Date;
}

const present = (row: ProgressRow): Progress => ({
  jobKey: row.job_key,
  done: row.done,
  total: row.total,
  state: row.state,
  detail: row.detail,
  cancelRequested: row.cancel_requested,
  updatedAt: new Date(row.updated_at),
});
