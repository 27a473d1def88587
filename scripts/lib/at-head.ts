import { MikroORM } from '@mikro-orm/postgresql';
import { migrate } from '#backend/database/migrate.ts';
import { ensureDatabase, withClient } from '#backend/services/postgres/roles.ts';
import { startThrowAwayCluster } from '#backend/services/postgres/throw-away.ts';
import config from '../../mikro-orm.config.ts';

const database = 'vesselry_head';

/** Gives an ORM on an empty database that has every migration; nobody's data are touched. */
export async function atHead(work: (orm: MikroORM) => Promise<void>): Promise<void> {
  const cluster = await startThrowAwayCluster((text) => process.stderr.write(`${text}\n`));
  try {
    await withClient(cluster.ownerUrl('postgres'), (client) => ensureDatabase(client, database));
    await migrate(cluster.ownerUrl(database)); // without the queue, whose schema the comparison would drop
    const orm = await MikroORM.init({ ...config, clientUrl: cluster.ownerUrl(database) });
    try {
      await work(orm);
    } finally {
      await orm.close(true);
    }
  } finally {
    await cluster.remove();
  }
}
