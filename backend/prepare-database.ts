import { migrate } from './database/migrate.ts';
import { installQueue } from './jobs/install.ts';
import { appRole } from './services/postgres/roles.ts';

/** Brings a database to this release, as its owner: tables, then the queue. Answers the migrations applied. */
export async function prepareDatabase(ownerUrl: string): Promise<string[]> {
  const applied = await migrate(ownerUrl);
  await installQueue(ownerUrl, { appRole });
  return applied;
}
