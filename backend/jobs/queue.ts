import { setTimeout as sleep } from 'node:timers/promises';
import pg from 'pg';
import PgBoss from 'pg-boss';
import { failJob, keepBeating, sweepDeadWorkers } from './beat.ts';
import { JobCancelled, progressWriter } from './progress.ts';
import { deadLetter, queueSchema, type JobData, type QueueName } from './queues.ts';

/** One try of a job. Handlers reread their row by id and may run twice. */
export interface Job<N extends QueueName> {
  id: string;
  data: JobData[N];
  /** 1 for the first try. */
  attempt: number;
  /** Aborted when the process stops; a long handler heeds it. */
  signal: AbortSignal;
  /** Tells how far the work is. @throws JobCancelled once somebody asked to cancel */
  report: (done: number, total?: number, detail?: string) => Promise<void>;
}

export type JobHandler<N extends QueueName> = (job: Job<N>) => Promise<void>;

export interface Queue {
  /** Begins to work on a queue, `parallel` jobs at a time in this process. */
  work<N extends QueueName>(name: N, handler: JobHandler<N>, options?: { parallel?: number }): void;
  /** Takes no new job, waits for running ones, and gives back what does not end in time. */
  stop: () => Promise<void>;
}

/** Seconds. */
export interface QueueTiming {
  poll: number;
  beat: number;
  /** After so long without a beat another process takes the job over. */
  stale: number;
  sweep: number;
  /** How long a stop waits for running jobs. */
  grace: number;
}

const usualTiming: QueueTiming = { poll: 1, beat: 5, stale: 20, sweep: 5, grace: 10 };

interface Running {
  job: PgBoss.JobWithMetadata<JobData[QueueName]>;
  abort: AbortController;
  givenBack: boolean;
}

/** Connects to the installed queue as the application role. */
export async function startQueue(
  appUrl: string,
  {
    onError,
    timing: chosen = {},
  }: { onError: (error: unknown, queue?: string) => void; timing?: Partial<QueueTiming> },
): Promise<Queue> {
  const timing = { ...usualTiming, ...chosen };
  const pool = new pg.Pool({ connectionString: appUrl, max: 5, application_name: 'vesselry jobs' });
  pool.on('error', (error) => onError(error));
  const boss = new PgBoss({
    db: { executeSql: (text, values) => pool.query(text, values) },
    schema: queueSchema,
    migrate: false,
  });
  boss.on('error', (error) => onError(error));
  await boss.start();

  const stopping = new AbortController();
  const running = new Set<Running>();
  const loops: Promise<void>[] = [];
  const pause = (seconds: number) =>
    sleep(seconds * 1000, undefined, { signal: stopping.signal }).catch(() => undefined);

  async function takeJobs<N extends QueueName>(name: N, handler: JobHandler<N>): Promise<void> {
    while (!stopping.signal.aborted) {
      const [job] = await boss.fetch<JobData[N]>(name, { includeMetadata: true });
      if (job) await attempt(job, handler).catch((error: unknown) => onError(error, name));
      else await pause(timing.poll);
    }
  }

  async function attempt<N extends QueueName>(
    job: PgBoss.JobWithMetadata<JobData[N]>,
    handler: JobHandler<N>,
  ) {
    const { id, name, data } = job;
    const abort = new AbortController();
    const entry: Running = { job, abort, givenBack: false };
    running.add(entry);
    const stopBeating = keepBeating(pool, id, timing.beat, onError);
    // A dead letter repeats the data of the job that died, whose progress is no longer its own.
    const progress = progressWriter(pool, 'jobKey' in data && name !== deadLetter ? data.jobKey : undefined);
    try {
      if (await progress.state('running')) throw new JobCancelled();
      await handler({ id, data, attempt: job.retryCount + 1, signal: abort.signal, report: progress.report });
      await progress.state('done');
      await boss.complete(name, id);
    } catch (error) {
      if (entry.givenBack) return;
      if (error instanceof JobCancelled) {
        await progress.state('cancelled');
        await boss.complete(name, id);
        return;
      }
      onError(error, name);
      await progress.state('queued');
      await failJob(boss, name, id, error instanceof Error ? error.name : 'Unknown');
    } finally {
      running.delete(entry);
      await stopBeating();
    }
  }

  async function sweep(): Promise<void> {
    while (!stopping.signal.aborted) {
      await sweepDeadWorkers(pool, boss, timing.stale).catch(onError);
      await pause(timing.sweep);
    }
  }

  /** A stop is not the job's fault: without a start on record it does not count as a try. */
  async function giveBack(entry: Running): Promise<void> {
    entry.givenBack = true;
    entry.abort.abort();
    await pool.query(
      `update ${queueSchema}.job set state = 'retry', start_after = now(), started_on = null
       where name = $1 and id = $2 and state = 'active'`,
      [entry.job.name, entry.job.id],
    );
  }

  loops.push(sweep());
  return {
    work: (name, handler, { parallel = 1 } = {}) => {
      for (let i = 0; i < parallel; i += 1) loops.push(takeJobs(name, handler));
    },
    stop: async () => {
      stopping.abort();
      await Promise.race([Promise.all(loops), sleep(timing.grace * 1000, undefined, { ref: false })]);
      await Promise.all([...running].map(giveBack));
      await boss.stop({ graceful: false });
      await pool.end();
    },
  };
}
