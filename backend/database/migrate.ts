import { MikroORM } from '@mikro-orm/postgresql';
import config from '../../mikro-orm.config.ts';
import { migrationsList } from './migrations/list.ts';

/**
 * Applies what is missing, as the owner, one process at a time.
 * @throws when the newest migration is not in the database afterwards: an empty list is no success
 */
export async function migrate(ownerUrl: string): Promise<string[]> {
  const quiet = { logger: () => undefined }; // the caller tells what was applied
  const orm = await MikroORM.init({ ...config, ...quiet, clientUrl: ownerUrl, pool: { min: 1, max: 4 } });
  const lock = (await orm.em.getKnex().client.acquireConnection()) as {
    query: (sql: string) => Promise<unknown>;
  };
  try {
    await lock.query(`select pg_advisory_lock(hashtextextended('vesselry migrations', 0))`);
    const applied = await orm.migrator.up();
    const executed = new Set((await orm.migrator.getExecutedMigrations()).map((row) => row.name));
    const newest = migrationsList.at(-1)?.name;
    if (newest === undefined || !executed.has(newest))
      throw new Error(`The migration ${newest} was not applied.`);
    return applied.map((row) => row.name);
  } finally {
    await lock.query(`select pg_advisory_unlock(hashtextextended('vesselry migrations', 0))`);
    await orm.em.getKnex().client.releaseConnection(lock);
    await orm.close(true);
  }
}
