import { MikroORM } from '@mikro-orm/postgresql';
import { withClient } from '../services/postgres/roles.ts';
import config from '../../mikro-orm.config.ts';
import { migrationsList } from './migrations/list.ts';

/**
 * Applies what is missing, as the owner, one process at a time.
 * @throws when the newest migration is not in the database afterwards: an empty list is no success
 */
export const migrate = (ownerUrl: string): Promise<string[]> =>
  withClient(ownerUrl, async (lock) => {
    const quiet = { logger: () => undefined }; // the caller tells what was applied
    const orm = await MikroORM.init({ ...config, ...quiet, clientUrl: ownerUrl, pool: { min: 1, max: 4 } });
    await lock.query(`select pg_advisory_lock(hashtextextended('vesselry migrations', 0))`);
    try {
      const applied = await orm.migrator.up();
      const executed = new Set((await orm.migrator.getExecutedMigrations()).map((row) => row.name));
      const newest = migrationsList.at(-1)?.name;
      if (newest === undefined || !executed.has(newest))
        throw new Error(`The migration ${newest} was not applied.`);
      return applied.map((row) => row.name);
    } finally {
      await orm.close(true);
    }
  });
