import { createHash } from 'node:crypto';
import { mkdir, stat, writeFile } from 'node:fs/promises';
import { existsSync, readFileSync } from 'node:fs';
import { dirname, join, resolve } from 'node:path';
import pg from 'pg';
import type { LocalSecrets } from '../../config/local-secrets.ts';
import { StartError, type Say } from '../../config/start-error.ts';
import { canReach, databaseAccount, type Account } from './account.ts';
import { postgresPrograms } from './binaries.ts';
import {
  makeCluster,
  ownerRole,
  runningPostmaster,
  startCluster,
  stopPostmaster,
  type Cluster,
  type Postmaster,
} from './cluster.ts';
import { appRole, ensureAppRole, ensureDatabase, localUrl } from './roles.ts';

export interface LocalPostgres {
  ownerUrl: string;
  url: string;
  stop: () => Promise<void>;
}

const database = 'vesselry';

/** Starts, or joins, the PostgreSQL of this installation; made on first use. */
export async function startLocalPostgres(
  dataFolder: string,
  secrets: LocalSecrets,
  say: Say,
): Promise<LocalPostgres> {
  const cluster = await findCluster(dataFolder, say);
  if (!existsSync(join(cluster.folder, 'PG_VERSION'))) {
    await refuseForeignFolder(cluster.folder);
    say(`making a database in ${cluster.folder}`);
    await makeCluster(cluster, secrets('databaseOwnerPassword'));
  }
  const joined = await runningPostmaster(cluster);
  const postmaster = joined ?? (await startCluster(cluster));
  try {
    return await open(cluster, postmaster, { dataFolder, secrets });
  } catch (error) {
    if (!joined) await stopPostmaster(cluster.folder, postmaster);
    throw error;
  }
}

async function open(
  cluster: Cluster,
  postmaster: Postmaster,
  { dataFolder, secrets }: { dataFolder: string; secrets: LocalSecrets },
): Promise<LocalPostgres> {
  const [ownerPassword, appPassword] = [secrets('databaseOwnerPassword'), secrets('databaseAppPassword')];
  // One connection is held for as long as we run: by it another start of this installation sees that we are here.
  const presence = await present(localUrl(postmaster, ownerRole, ownerPassword, 'postgres'), dataFolder);
  await ensureAppRole(presence, appPassword);
  await ensureDatabase(presence, database);
  return {
    ownerUrl: localUrl(postmaster, ownerRole, ownerPassword, database),
    url: localUrl(postmaster, appRole, appPassword, database),
    stop: async () => {
      const alone = await isAlone(presence);
      await presence.end().catch(() => undefined);
      if (alone) await stopPostmaster(cluster.folder, postmaster);
    },
  };
}

/** In .data, or in the account's home where the account cannot enter this project's folder. */
async function findCluster(dataFolder: string, say: Say): Promise<Cluster> {
  await mkdir(dataFolder, { recursive: true });
  const here = join(resolve(dataFolder), 'postgres');
  const account = await accountFor(here);
  const hash = createHash('sha256').update(resolve(dataFolder)).digest('hex').slice(0, 12);
  const away = join(account.home, `vesselry-${hash}`);
  const reachable = canReach(account, dirname(here));
  if (!reachable && existsSync(here)) {
    throw new StartError(
      `The database's account can no longer enter ${dataFolder}. Open that folder to it again.`,
    );
  }
  const folder = reachable && (existsSync(here) || !existsSync(away)) ? here : away;
  if (!reachable) say(`the account "postgres" cannot enter ${dataFolder}: the database lies in ${away}`);
  await writeFile(join(dataFolder, 'postgres.where'), `${folder}\n`);
  return { folder, account, programs: postgresPrograms(say, majorOf(folder)) };
}

/** A database that an ordinary user made keeps its owner when root starts it. */
async function accountFor(folder: string): Promise<Account> {
  const account = databaseAccount();
  const owner = await stat(folder).catch(() => null);
  if (!account.ids || !owner || owner.uid === 0) return account;
  return { ...account, ids: { uid: owner.uid, gid: owner.gid } };
}

function majorOf(folder: string): string | undefined {
  const file = join(folder, 'PG_VERSION');
  return existsSync(file) ? readFileSync(file, 'utf8').trim() : undefined;
}

/** Our own half-made clusters have another name; anything else in the place is not ours to remove. */
async function refuseForeignFolder(folder: string): Promise<void> {
  if (!existsSync(folder)) return;
  throw new StartError(`${folder} is there and holds no whole database. Move it away, then start again.`);
}

async function present(url: string, dataFolder: string): Promise<pg.Client> {
  const client = new pg.Client({ connectionString: url, application_name: 'vesselry presence' });
  client.on('error', () => undefined); // the server ended; whoever queries next will say so
  try {
    await client.connect();
    return client;
  } catch (error) {
    if ((error as { code?: string }).code !== '28P01') throw error;
    throw new StartError(
      `The database does not take the password in ${join(dataFolder, 'secrets.json')}. ` +
        'Put back the file that belongs to it, or move .data away to begin anew.',
      { cause: error },
    );
  }
}

/** Whoever leaves last stops the server, also when an earlier start was killed and could not. */
async function isAlone(presence: pg.Client): Promise<boolean> {
  const others = await presence
    .query(
      `select from pg_stat_activity where backend_type = 'client backend' and pid <> pg_backend_pid()
       and application_name = 'vesselry presence'`,
    )
    .catch(() => null);
  return others?.rowCount === 0;
}
