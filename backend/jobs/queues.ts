/**
 * What each queue carries: ids only, for payloads outlive the rows' rights and redactions (AT-11).
 * A job that a person waits for carries the `jobKey` of its progress row.
 * A new kind of job is a line here, a line in `queues`, and a handler given to `queue.work`.
 */
export interface JobData {
  'mail.send': { mailId: string };
  tidy: Record<string, never>;
  'cut.build': { studyId: string; kind: 'rehearsal' | 'final'; personId: string; jobKey: string };
  'run.execute': { studyId: string; runId: string; jobKey: string };
  'export.build': { studyId: string; exportId: string; jobKey: string };
  dead: { jobKey?: string; mailId?: string };
}

export type QueueName = keyof JobData;

export interface QueueOptions {
  /** Tries after the first. */
  retryLimit: number;
  /** Seconds before a retry; with `retryBackoff` the delay doubles each time. */
  retryDelay: number;
  retryBackoff: boolean;
  /** A queue that fills itself, five cron fields in UTC; its data are empty. */
  cron?: string;
}

/** Where a job goes that has used up its tries. */
export const deadLetter = 'dead' satisfies QueueName;

export const queues: Readonly<Record<QueueName, QueueOptions>> = {
  [deadLetter]: { retryLimit: 5, retryDelay: 5, retryBackoff: true },
  tidy: { retryLimit: 2, retryDelay: 60, retryBackoff: false, cron: '17 3 * * *' },
  'cut.build': { retryLimit: 2, retryDelay: 2, retryBackoff: true },
  'run.execute': { retryLimit: 2, retryDelay: 2, retryBackoff: true },
  'export.build': { retryLimit: 2, retryDelay: 2, retryBackoff: true },
  // Doubling from half a minute spans most of a day: a mail server that is down overnight loses nothing.
  'mail.send': { retryLimit: 10, retryDelay: 30, retryBackoff: true },
};

/** pg-boss keeps to a schema of its own, out of the migrations' sight. */
export const queueSchema = 'job';
