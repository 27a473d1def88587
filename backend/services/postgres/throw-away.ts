import { randomBytes } from 'node:crypto';
import { chown, mkdir, readdir, rm, stat } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Say } from '../../config/start-error.ts';
import { databaseAccount } from './account.ts';
import { postgresPrograms } from './binaries.ts';
import {
  makeCluster,
  ownerRole,
  reachableParent,
  runningPostmaster,
  startCluster,
  stopPostmaster,
  throwAwayOptions,
  type Cluster,
} from './cluster.ts';
import { appRole, ensureAppRole, localUrl, withClient } from './roles.ts';

/** A cluster for tests and checks, beside and without the one in .data. */
export interface ThrowAwayCluster {
  ownerUrl: (database: string) => string;
  appUrl: (database: string) => string;
  remove: () => Promise<void>;
}

const prefix = 'vesselry-throw-away-';

/** Starts a cluster in the system's temporary folder; `remove` stops it and leaves nothing behind. */
export async function startThrowAwayCluster(say: Say = () => undefined): Promise<ThrowAwayCluster> {
  const programs = postgresPrograms(say);
  const account = databaseAccount();
  const parent = reachableParent(account, [tmpdir(), account.home]);
  await removeAbandoned(parent, { programs, account });
  const home = join(parent, `${prefix}${process.pid}-${randomBytes(4).toString('hex')}`);
  await mkdir(home, { mode: 0o700 });
  if (account.ids) await chown(home, account.ids.uid, account.ids.gid);
  const cluster = { folder: join(home, 'data'), programs, account };
  const [ownerPassword, appPassword] = [randomBytes(18).toString('hex'), randomBytes(18).toString('hex')];
  await makeCluster(cluster, ownerPassword);
  const postmaster = await startCluster(cluster, throwAwayOptions);
  const ownerUrl = (database: string) => localUrl(postmaster, ownerRole, ownerPassword, database);
  await withClient(ownerUrl('postgres'), (client) => ensureAppRole(client, appPassword));
  return {
    ownerUrl,
    appUrl: (database) => localUrl(postmaster, appRole, appPassword, database),
    remove: async () => {
      await stopPostmaster(cluster.folder, postmaster);
      await rm(home, { recursive: true, force: true });
    },
  };
}

/** A run that was killed could not clean up: its folder names the process, which is gone. */
async function removeAbandoned(parent: string, server: Omit<Cluster, 'folder'>): Promise<void> {
  const uid = server.account.ids?.uid ?? process.getuid?.();
  for (const name of (await readdir(parent)).filter((entry) => entry.startsWith(prefix))) {
    const home = join(parent, name);
    if (isAlive(Number(name.slice(prefix.length).split('-')[0]))) continue;
    if ((await stat(home)).uid !== uid) continue; // another account's to clear away
    const cluster = { folder: join(home, 'data'), ...server };
    const postmaster = await runningPostmaster(cluster);
    if (postmaster) await stopPostmaster(cluster.folder, postmaster);
    await rm(home, { recursive: true, force: true });
  }
}

function isAlive(pid: number): boolean {
  try {
    process.kill(pid, 0);
    return true;
  } catch (error) {
    return (error as NodeJS.ErrnoException).code === 'EPERM';
  }
}
