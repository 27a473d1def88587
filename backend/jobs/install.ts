import pg from 'pg';
import PgBoss from 'pg-boss';
import { deadLetter, queueSchema, queues, type QueueOptions } from './queues.ts';

/** Longer than any job may take; a worker that died is noticed by its missing beat long before. */
const expireInHours = 12;

/**
 * Brings the queue's own schema and its queues up to date; part of the migrate step, because it needs the owner.
 * The application role gets to use them and may not create any.
 */
export async function installQueue(
  ownerUrl: string,
  { appRole, queues: wanted = queues }: { appRole: string; queues?: Readonly<Record<string, QueueOptions>> },
): Promise<void> {
  const boss = new PgBoss({ connectionString: ownerUrl, schema: queueSchema, max: 1, supervise: false });
  boss.on('error', () => undefined); // each call below rejects by itself
  await boss.start();
  try {
    const rest = Object.keys(wanted).filter((name) => name !== deadLetter);
    for (const name of [...(deadLetter in wanted ? [deadLetter] : []), ...rest]) {
      await installOne(boss, name, wanted[name]!);
    }
  } finally {
    await boss.stop({ graceful: false });
  }
  await grant(ownerUrl, appRole);
}

async function installOne(boss: PgBoss, name: string, { cron, ...retries }: QueueOptions): Promise<void> {
  const options = { name, ...retries, expireInHours, ...(name === deadLetter ? {} : { deadLetter }) };
  await boss.createQueue(name, options);
  await boss.updateQueue(name, options);
  if (cron) await boss.schedule(name, cron, {}, { tz: 'UTC' });
  else await boss.unschedule(name);
}

async function grant(ownerUrl: string, appRole: string): Promise<void> {
  const client = new pg.Client({ connectionString: ownerUrl });
  await client.connect();
  try {
    const role = client.escapeIdentifier(appRole);
    await client.query(`
      grant usage on schema ${queueSchema} to ${role};
      grant select, insert, update, delete on all tables in schema ${queueSchema} to ${role};
      revoke execute on all functions in schema ${queueSchema} from public;
    `);
  } finally {
    await client.end();
  }
}
