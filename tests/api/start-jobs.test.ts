import { spawn, type ChildProcess } from 'node:child_process';
import { randomUUID } from 'node:crypto';
import { once } from 'node:events';
import pg from 'pg';
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest';
import { installQueue } from '#backend/jobs/install.ts';
import { openProgress, readProgress, requestCancel } from '#backend/jobs/progress.ts';
import { startQueue, type Job, type Queue, type QueueTiming } from '#backend/jobs/queue.ts';
import type { JobData, QueueName } from '#backend/jobs/queues.ts';
import { sendJob } from '#backend/jobs/send.ts';
import { startTestServer, type TestServer } from '#tests/support/server.ts';

/** Queues of this test only: the product's names are closed, so these are passed as one of them. */
const trial = 'trial.work' as QueueName as 'dead';
const trialQueues = Object.fromEntries([
  ['dead', retries(0)],
  [trial, retries(2)],
]);
const brisk: Partial<QueueTiming> = { poll: 0.05, beat: 0.2, stale: 1, sweep: 0.2, grace: 0.5 };

function retries(retryLimit: number) {
  return { retryLimit, retryDelay: 0, retryBackoff: false };
}

let server: TestServer;
let queue: Queue;
const errors: unknown[] = [];

beforeAll(async () => {
  server = await startTestServer();
  await installQueue(server.ownerUrl, { appRole: 'vesselry_app', queues: trialQueues });
});
afterAll(() => server.stop());

beforeEach(async () => {
  errors.length = 0;
  queue = await startQueue(server.appUrl, { onError: (error) => errors.push(error), timing: brisk });
});
afterEach(async () => {
  await queue.stop();
  await server.ownerSql('delete from job.job');
});

const send = (data: JobData['dead']) => server.orm.em.fork().transactional((tx) => sendJob(tx, trial, data));
const states = async () =>
  (
    await server.ownerSql<{ name: string; state: string }>('select name, state from job.job order by name')
  ).map(({ name, state }) => `${name} ${state}`);

describe('a job', () => {
  it('is committed and rolled back with the transaction that sends it', async () => {
    await send({ mailId: 'kept' });
    const refused = server.orm.em.fork().transactional(async (tx) => {
      await sendJob(tx, trial, { mailId: 'lost' });
      throw new Error('the act failed');
    });
    await expect(refused).rejects.toThrow('the act failed');

    const seen: JobData['dead'][] = [];
    queue.work(trial, async ({ data }) => void seen.push(data));

    await vi.waitFor(async () => expect(await states()).toEqual(['trial.work completed']));
    expect(seen).toEqual([{ mailId: 'kept' }]);
  });

  it('is refused outside a transaction, and by a queue that is not installed', async () => {
    await expect(sendJob(server.orm.em.fork(), trial, {})).rejects.toThrow('inside a transaction');
    const unknown = server.orm.em
      .fork()
      .transactional((tx) => sendJob(tx, 'no.such.queue' as typeof trial, {}));
    await expect(unknown).rejects.toThrow('no.such.queue is not installed');
  });

  it('is tried three times and then goes to the dead letters with its data', async () => {
    const attempts: number[] = [];
    const dead: JobData['dead'][] = [];
    queue.work(trial, async ({ attempt }) => {
      attempts.push(attempt);
      throw new TypeError('haematocrit 0.45 of a person');
    });
    queue.work('dead', async ({ data }) => void dead.push(data));

    await send({ mailId: 'unlucky' });

    await vi.waitFor(() => expect(dead).toEqual([{ mailId: 'unlucky' }]), 5000);
    expect(attempts).toEqual([1, 2, 3]);
    expect(errors).toHaveLength(3);
    // The message of an error may hold data, so only its kind stays with the job.
    const rows = await server.ownerSql<{ output: unknown }>('select output from job.job where name = $1', [
      trial,
    ]);
    expect(rows).toEqual([{ output: { kind: 'TypeError' } }]);
  });

  it('runs several at a time only where asked to', async () => {
    let now = 0;
    let peak = 0;
    queue.work(
      trial,
      async () => {
        now += 1;
        peak = Math.max(peak, now);
        await new Promise((resolve) => setTimeout(resolve, 100));
        now -= 1;
      },
      { parallel: 3 },
    );
    await Promise.all(Array.from({ length: 9 }, () => send({})));

    await vi.waitFor(async () => expect(await states()).toEqual(Array(9).fill('trial.work completed')), 5000);
    expect(peak).toBe(3);
  });

  it('goes back to the queue, no try counted, when the process stops before it ends', async () => {
    let stopped = false;
    const work = ({ signal }: Job<'dead'>) =>
      new Promise<void>((_resolve, reject) => {
        signal.addEventListener('abort', () => {
          stopped = true;
          reject(new Error('stopped'));
        });
      });
    queue.work(trial, work);
    await send({});
    await vi.waitFor(async () => expect(await states()).toEqual(['trial.work active']));

    await queue.stop();

    expect(stopped).toBe(true);
    expect(await states()).toEqual(['trial.work retry']);
    queue = await startQueue(server.appUrl, { onError: (error) => errors.push(error), timing: brisk });
    const attempts: number[] = [];
    queue.work(trial, async ({ attempt }) => void attempts.push(attempt));
    await vi.waitFor(() => expect(attempts).toEqual([1]));
    expect(errors).toEqual([]);
  });
});

describe('progress', () => {
  const begin = async () => {
    const jobKey = randomUUID();
    await server.orm.em.fork().transactional(async (tx) => {
      await openProgress(tx, jobKey);
      await sendJob(tx, trial, { jobKey });
    });
    return jobKey;
  };
  const read = (jobKey: string) => readProgress(server.orm.em.fork(), jobKey);

  it('counts from queued to done', async () => {
    const jobKey = await begin();
    expect(await read(jobKey)).toMatchObject({ jobKey, state: 'queued', done: 0, total: null });
    let release = () => undefined as void;
    const held = new Promise<void>((resolve) => (release = resolve));

    queue.work(trial, async ({ report }) => {
      await report(3, 10, 'entries');
      await held;
      await report(10, 10, 'entries');
    });

    await vi.waitFor(async () =>
      expect(await read(jobKey)).toMatchObject({ state: 'running', done: 3, total: 10, detail: 'entries' }),
    );
    release();
    await vi.waitFor(async () => expect(await read(jobKey)).toMatchObject({ state: 'done', done: 10 }));
  });

  it('stops at its next report once somebody cancels, and is not tried again', async () => {
    const jobKey = await begin();
    let reports = 0;
    queue.work(trial, async ({ report }) => {
      for (;;) {
        reports += 1;
        await report(reports, reports);
        await new Promise((resolve) => setTimeout(resolve, 20));
      }
    });
    await vi.waitFor(() => expect(reports).toBeGreaterThan(1));

    expect(await requestCancel(server.orm.em.fork(), jobKey)).toBe(true);

    await vi.waitFor(async () => expect(await read(jobKey)).toMatchObject({ state: 'cancelled' }));
    expect(await states()).toEqual(['trial.work completed']);
    expect(await requestCancel(server.orm.em.fork(), jobKey)).toBe(false);
  });

  it('of a job cancelled before its start never runs it', async () => {
    const jobKey = await begin();
    await requestCancel(server.orm.em.fork(), jobKey);
    const handler = vi.fn(async () => undefined);

    queue.work(trial, handler);

    await vi.waitFor(async () => expect(await read(jobKey)).toMatchObject({ state: 'cancelled' }));
    expect(handler).not.toHaveBeenCalled();
  });

  it('knows nothing of a job that does not exist', async () => {
    expect(await read(randomUUID())).toBeNull();
  });
});

describe('a worker that is killed', () => {
  let worker: ChildProcess | undefined;
  afterEach(() => worker?.kill('SIGKILL'));

  it('loses no job: another one takes it over when its beats stay out', async () => {
    worker = spawn(
      process.execPath,
      [
        '--import',
        'tsx',
        new URL('../support/endless-worker.ts', import.meta.url).pathname,
        server.appUrl,
        trial,
      ],
      { stdio: 'inherit' },
    );
    await send({ mailId: 'orphan' });
    await vi.waitFor(async () => expect(await states()).toEqual(['trial.work active']), 15_000);
    await vi.waitFor(async () => expect(await server.ownerSql('select from job_beat')).toHaveLength(1), 5000);

    const attempts: number[] = [];
    queue.work(trial, async ({ attempt }) => void attempts.push(attempt));
    await new Promise((resolve) => setTimeout(resolve, 1500)); // longer than a job may go without a beat
    expect(attempts).toEqual([]);
    worker.kill('SIGKILL');
    await once(worker, 'exit');

    await vi.waitFor(() => expect(attempts).toEqual([2]), 5000);
    await vi.waitFor(async () => expect(await states()).toEqual(['trial.work completed']));
    await vi.waitFor(async () => expect(await server.ownerSql('select from job_beat')).toEqual([]));
  });
});

describe('the queue', () => {
  // proves AC-09
  it('cannot be changed by the application role', async () => {
    const client = new pg.Client({ connectionString: server.appUrl });
    await client.connect();
    const statements = [
      `select job.create_queue('mine', '{"policy": "standard"}')`,
      'create table job.mine (n int)',
      'create table mine (n int)',
      'create temporary table mine (n int)',
      'drop table job.job',
      'create schema mine',
    ];
    for (const sql of statements) {
      await expect(client.query(sql), sql).rejects.toMatchObject({
        code: expect.stringMatching(/^42/) as string,
      });
    }
    await client.end();
  });

  it('goes on after the database broke its connections', async () => {
    queue.work(trial, async () => undefined);
    await server.ownerSql(
      `select pg_terminate_backend(pid) from pg_stat_activity where application_name = 'vesselry jobs'`,
    );
    await send({});

    await vi.waitFor(async () => expect(await states()).toEqual(['trial.work completed']), 5000);
  });
});
