import { setTimeout as sleep } from 'node:timers/promises';
import type { Deps } from '#backend/http/deps.ts';
import { readProgress } from '#backend/jobs/progress.ts';

/** Waits for a job that a worker of this process carries out. */
export async function jobDone({ orm }: Deps, jobKey: string): Promise<void> {
  for (let tries = 0; tries < 1200; tries += 1) {
    const progress = await readProgress(orm.em.fork(), jobKey);
    if (progress?.state === 'done') return;
    if (progress?.state === 'failed') break;
    await sleep(100);
  }
  throw new Error('A job of the demo did not end.');
}
