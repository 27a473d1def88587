import { randomBytes } from 'node:crypto';
import { existsSync, readFileSync } from 'node:fs';
import { chown, mkdir, mkdtemp, readFile, rename, rm, writeFile } from 'node:fs/promises';
import { createServer, type AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { StartError } from '../../config/start-error.ts';
import { canReach, runAs, type Account } from './account.ts';

/** A data folder with the programs and the account that serve it. */
export interface Cluster {
  folder: string;
  programs: string;
  account: Account;
}

/** A running server of a cluster. */
export interface Postmaster {
  pid: number;
  port: number;
}

export const ownerRole = 'vesselry';

/** Settings of a cluster that may be lost at any moment: three times faster, never for data. */
export const throwAwayOptions = '-c fsync=off -c synchronous_commit=off -c full_page_writes=off';

/**
 * Makes the cluster's data folder. It grows under another name and is renamed when whole,
 * so that a start killed half-way leaves nothing that looks like a database.
 */
export async function makeCluster({ folder, programs, account }: Cluster, password: string): Promise<void> {
  const growing = `${folder}.making`;
  await rm(growing, { recursive: true, force: true });
  await mkdir(growing, { mode: 0o700 });
  if (account.ids) await chown(growing, account.ids.uid, account.ids.gid);
  const made = await withPasswordFile(account, password, (file) =>
    runAs(account, join(programs, 'initdb'), [
      `--pgdata=${growing}`,
      `--username=${ownerRole}`,
      `--pwfile=${file}`,
      ...['--auth=scram-sha-256', '--encoding=UTF8', '--locale=C.UTF-8', '--data-checksums'],
    ]),
  );
  if (made.code !== 0) {
    await rm(growing, { recursive: true, force: true });
    throw new StartError(`The database could not be made in ${folder}:\n${made.output}`);
  }
  await rename(growing, folder);
}

/** Starts the cluster on a free port of the loopback, without a unix socket. */
export async function startCluster(cluster: Cluster, options = ''): Promise<Postmaster> {
  const { folder, programs, account } = cluster;
  let outcome = { code: 1, output: '' };
  // Between finding a port and taking it another program may take it: then once more.
  for (let attempt = 0; attempt < 3; attempt += 1) {
    const listen = `-p ${await freePort()} -c listen_addresses=127.0.0.1 -c unix_socket_directories=''`;
    // Without a log file the server would inherit our pipe, and waiting for pg_ctl would never end.
    const log = `--log=${join(folder, 'server.log')}`;
    const args = ['start', `--pgdata=${folder}`, log, '--wait', '--timeout=60', '-o', `${listen} ${options}`];
    outcome = await runAs(account, join(programs, 'pg_ctl'), args);
    const postmaster = await runningPostmaster(cluster);
    if (postmaster && outcome.code === 0) return postmaster;
    if (postmaster) await stopPostmaster(folder, postmaster); // interrupted, or too slow to be waited for
    await sleep(300);
  }
  throw new StartError(`The database in ${folder} does not start:\n${outcome.output}\n${logTail(folder)}`);
}

/** The cluster's server, if one runs; a pid file that a crash left behind is cleared away. */
export async function runningPostmaster({ folder, programs, account }: Cluster): Promise<Postmaster | null> {
  const pidFile = join(folder, 'postmaster.pid');
  if (!existsSync(pidFile)) return null;
  const status = await runAs(account, join(programs, 'pg_ctl'), ['status', `--pgdata=${folder}`]);
  if (status.code !== 0) return null;
  const lines = (await readFile(pidFile, 'utf8')).split('\n');
  const [pid, port] = [Number(lines[0]), Number(lines[3])];
  if (pid > 0 && port > 0 && servesFolder(pid, folder)) return { pid, port };
  // After a crash the number may belong to another program, and PostgreSQL would refuse to start beside it.
  await rm(pidFile, { force: true });
  return null;
}

/** Stops the server quickly and cleanly (SIGINT, "fast shutdown") and waits until it is gone. */
export async function stopPostmaster(folder: string, { pid }: Postmaster): Promise<void> {
  if (!servesFolder(pid, folder)) return;
  process.kill(pid, 'SIGINT');
  // The file and not the process tells the end: where nobody reaps, a dead process keeps its number.
  const pidFile = join(folder, 'postmaster.pid');
  for (let waited = 0; existsSync(pidFile) && waited < 30_000; waited += 50) await sleep(50);
  if (existsSync(pidFile)) throw new StartError(`The database in ${folder} has not stopped within 30 s.`);
}

/** The first of the folders that the account can enter. */
export function reachableParent(account: Account, folders: string[]): string {
  const parent = folders.find((folder) => canReach(account, folder));
  if (!parent) throw new StartError(`The database's account can enter none of: ${folders.join(', ')}`);
  return parent;
}

/** A process serves the folder when its command line names it; without /proc the number must do. */
function servesFolder(pid: number, folder: string): boolean {
  if (!existsSync('/proc/self/cmdline')) return true;
  try {
    return readFileSync(`/proc/${pid}/cmdline`, 'utf8').split('\0').includes(folder);
  } catch {
    return false;
  }
}

async function withPasswordFile<T>(account: Account, password: string, work: (file: string) => Promise<T>) {
  const parent = await mkdtemp(join(reachableParent(account, [tmpdir(), account.home]), 'vesselry-'));
  try {
    const file = join(parent, randomBytes(8).toString('hex'));
    await writeFile(file, `${password}\n`, { mode: 0o600 });
    for (const path of account.ids ? [file, parent] : []) {
      await chown(path, account.ids!.uid, account.ids!.gid);
    }
    return await work(file);
  } finally {
    await rm(parent, { recursive: true, force: true });
  }
}

function freePort(): Promise<number> {
  return new Promise((resolve, reject) => {
    const probe = createServer().once('error', reject);
    probe.listen(0, '127.0.0.1', () => {
      const { port } = probe.address() as AddressInfo;
      probe.close(() => resolve(port));
    });
  });
}

function logTail(folder: string): string {
  const log = join(folder, 'server.log');
  return existsSync(log) ? readFileSync(log, 'utf8').trimEnd().split('\n').slice(-5).join('\n') : '';
}
