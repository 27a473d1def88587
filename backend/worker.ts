import type { Deps } from './http/deps.ts';
import { logger, stackOf } from './http/logger.ts';
import { failMail } from './jobs/mail/outbox.ts';
import { sendQueuedMail } from './jobs/mail/send-queued-mail.ts';
import { failProgress } from './jobs/progress.ts';
import { startQueue, type Queue, type QueueTiming } from './jobs/queue.ts';
import { tidy } from './jobs/tidy.ts';
import { cutJob, runJob } from './modules/analysis/index.ts';
import { exportJob } from './modules/exports/index.ts';
import type { Mailer } from './services/mail.ts';

export interface WorkerDeps extends Deps {
  mailer: Mailer;
}

/** Starts to work on every queue. A module's handler is registered here, one line a queue. */
export async function startWorker(
  appUrl: string,
  { orm, mailer, settings, objectStore }: WorkerDeps,
  timing?: Partial<QueueTiming>,
): Promise<Queue> {
  const queue = await startQueue(appUrl, {
    onError: (error, name) =>
      logger.error({ error: stackOf(error), queue: name }, name ? 'a job failed' : 'the queue met an error'),
    timing,
  });
  const fork = () => orm.em.fork();
  queue.work('mail.send', sendQueuedMail({ fork, sendMail: mailer.sendMail, publicUrl: settings.publicUrl }));
  queue.work('tidy', tidy(fork));
  queue.work('cut.build', cutJob(fork, objectStore));
  queue.work('run.execute', runJob(fork, objectStore));
  queue.work('export.build', exportJob(fork, objectStore));
  queue.work('dead', async ({ data: { jobKey, mailId } }) => {
    if (jobKey) await failProgress(fork(), jobKey);
    if (mailId) await failMail(fork(), mailId);
  });
  return queue;
}
