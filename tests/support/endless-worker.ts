import { startQueue } from '#backend/jobs/queue.ts';
import type { QueueName } from '#backend/jobs/queues.ts';

/** A process of its own that takes one job and never ends it, to be killed by the test. */
const [appUrl = '', name = ''] = process.argv.slice(2);
const queue = await startQueue(appUrl, {
  onError: (error) => console.error(error),
  timing: { poll: 0.05, beat: 0.2, sweep: 60 },
});
queue.work(name as QueueName, () => new Promise(() => undefined));
