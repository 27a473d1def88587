import { spawnSync } from 'node:child_process';
import { chmod, mkdir, mkdtemp, readFile, rename, rm, stat, writeFile } from 'node:fs/promises';
import { existsSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest';
import { localSecrets } from '#backend/config/local-secrets.ts';
import { StartError } from '#backend/config/start-error.ts';
import { startLocalPostgres, type LocalPostgres } from '#backend/services/postgres/local-postgres.ts';
import { withClient } from '#backend/services/postgres/roles.ts';

const asRoot = process.getuid?.() === 0;
const running: LocalPostgres[] = [];
const said: string[] = [];
let home: string;
let dataFolder: string;

/** A project's folder that the database's account can pass. */
async function newHome(): Promise<string> {
  const folder = await mkdtemp(join(tmpdir(), 'vesselry-start-'));
  await chmod(folder, 0o755);
  return folder;
}
function moveTo(folder: string): void {
  home = folder;
  dataFolder = join(folder, '.data');
}
async function removeHome(): Promise<void> {
  const place = await placeOf().catch(() => undefined);
  if (place) await rm(place, { recursive: true, force: true });
  await rm(home, { recursive: true, force: true });
}
async function stopAll(): Promise<void> {
  for (const postgres of running.splice(0)) await postgres.stop();
}

async function start(): Promise<LocalPostgres> {
  const postgres = await startLocalPostgres(dataFolder, localSecrets(dataFolder), (text) => said.push(text));
  running.push(postgres);
  return postgres;
}
async function stop(postgres: LocalPostgres): Promise<void> {
  running.splice(running.indexOf(postgres), 1);
  await postgres.stop();
}
const placeOf = async () => (await readFile(join(dataFolder, 'postgres.where'), 'utf8')).trim();
const pidFile = async () => join(await placeOf(), 'postmaster.pid');
const pidOf = async () => Number((await readFile(await pidFile(), 'utf8')).split('\n')[0]);
const query = async (url: string, sql: string) =>
  (await withClient(url, (client) => client.query(sql))).rows as unknown[];
const remembers = (postgres: LocalPostgres) => query(postgres.ownerUrl, 'select n from remembered');

/** These tests share one installation: making a database is the slow part. */
describe('the database of an installation that was given none', () => {
  beforeAll(async () => moveTo(await newHome()));
  beforeEach(() => void said.splice(0));
  afterEach(stopAll);
  afterAll(removeHome);

  it('is made once, with an owner and a role that owns nothing, and keeps its data', async () => {
    const first = await start();
    expect(await query(first.ownerUrl, 'select current_user as me')).toEqual([{ me: 'vesselry' }]);
    expect(await query(first.url, 'select current_user as me')).toEqual([{ me: 'vesselry_app' }]);
    expect(
      await query(
        first.url,
        'select rolsuper, rolcreatedb, rolcreaterole from pg_roles where rolname = current_user',
      ),
    ).toEqual([{ rolsuper: false, rolcreatedb: false, rolcreaterole: false }]);
    await query(first.ownerUrl, 'create table remembered as select 1 as n');
    await stop(first);
    expect(existsSync(await pidFile())).toBe(false);

    const began = performance.now();
    const second = await start();

    expect(performance.now() - began).toBeLessThan(5000);
    expect(await remembers(second)).toEqual([{ n: 1 }]);
    expect(said.filter((text) => text.startsWith('making'))).toHaveLength(1);
  });

  it('listens on the loopback only, and asks even there for a password', async () => {
    const postgres = await start();
    expect(await query(postgres.ownerUrl, 'show listen_addresses')).toEqual([
      { listen_addresses: '127.0.0.1' },
    ]);
    expect(await query(postgres.ownerUrl, 'show unix_socket_directories')).toEqual([
      { unix_socket_directories: '' },
    ]);

    const stranger = new URL(postgres.ownerUrl);
    stranger.password = 'guess';
    await expect(query(stranger.href, 'select 1')).rejects.toMatchObject({ code: '28P01' });
    expect((await stat(join(dataFolder, 'secrets.json'))).mode & 0o777).toBe(0o600);
    expect((await stat(await placeOf())).mode & 0o077).toBe(0);
  });

  it.runIf(asRoot)('does not run as root', async () => {
    await start();
    const status = await readFile(`/proc/${await pidOf()}/status`, 'utf8');

    expect(/^Uid:\s+(\d+)/m.exec(status)?.[1]).not.toBe('0');
  });

  it('is shared by a second start, and stopped by whoever leaves last', async () => {
    const first = await start();
    const pid = await pidOf();
    const second = await start();
    expect(await pidOf()).toBe(pid);

    await stop(first);
    expect(await query(second.url, 'select 1 as n')).toEqual([{ n: 1 }]);
    await stop(second);

    expect(existsSync(await pidFile())).toBe(false);
  });

  it('is left running by a start that was killed, and taken up by the next', async () => {
    const script = join(import.meta.dirname, '../support/killed-start.ts');
    expect(spawnSync(process.execPath, ['--import', 'tsx', script, dataFolder]).signal).toBe('SIGKILL');
    const pid = await pidOf();

    const next = await start();
    expect(await pidOf()).toBe(pid);
    await vi.waitFor(async () => expect(await query(next.ownerUrl, presences)).toEqual([{ n: 1 }]), 5000);
    await stop(next);

    expect(existsSync(await pidFile())).toBe(false);
  });

  it('recovers after its server was killed', async () => {
    const first = await start();
    process.kill(await pidOf(), 'SIGKILL');
    await stop(first);
    expect(existsSync(await pidFile())).toBe(true);

    expect(await remembers(await start())).toEqual([{ n: 1 }]);
  });

  it('is not deceived by a pid file whose number is another program now', async () => {
    const first = await start();
    await stop(first);
    const lines = [process.pid, await placeOf(), 1, 5432, '', '127.0.0.1', '', 'ready'];
    await writeFile(await pidFile(), `${lines.join('\n')}\n`);

    const second = await start();

    expect(await remembers(second)).toEqual([{ n: 1 }]);
    expect(await pidOf()).not.toBe(process.pid);
  });

  it('says what to do when its password was lost', async () => {
    const file = join(dataFolder, 'secrets.json');
    await rename(file, `${file}.kept`);

    const failure = await start().catch((error: unknown) => error);

    await rename(`${file}.kept`, file);
    expect(existsSync(await pidFile())).toBe(false); // what it had started, it stopped
    expect(failure).toBeInstanceOf(StartError);
    expect((failure as Error).message).toMatch(/secrets\.json.*Put back/);
  });

  it('says which PostgreSQL is missing when another version made it', async () => {
    const file = join(await placeOf(), 'PG_VERSION');
    const version = await readFile(file);
    await writeFile(file, '9\n');

    await expect(start()).rejects.toThrow('postgresql-9');

    await writeFile(file, version);
  });
});

describe('a database that is not there yet', () => {
  beforeEach(async () => moveTo(await newHome()));
  afterEach(async () => {
    await stopAll();
    await removeHome();
  });

  it('is made anew where an earlier start was killed while making it', async () => {
    await mkdir(join(dataFolder, 'postgres.making', 'base'), { recursive: true });
    await writeFile(join(dataFolder, 'postgres.making', 'PG_VERSION'), '15\n');

    expect(await query((await start()).url, 'select 1 as n')).toEqual([{ n: 1 }]);
    expect(existsSync(join(dataFolder, 'postgres.making'))).toBe(false);
  });

  it('is not made over a folder that holds something else', async () => {
    const folder = join(dataFolder, 'postgres');
    await mkdir(folder, { recursive: true });
    await writeFile(join(folder, 'thesis.txt'), 'mine');

    await expect(start()).rejects.toThrow(/holds no whole database. Move it away/);
    expect(await readFile(join(folder, 'thesis.txt'), 'utf8')).toBe('mine');
  });

  it.runIf(asRoot)("lies in the account's home when the project is out of its reach", async () => {
    await chmod(home, 0o700);

    const postgres = await start();

    const place = await placeOf();
    expect(place.startsWith(dataFolder)).toBe(false);
    expect(place).toMatch(/\/vesselry-[0-9a-f]{12}$/);
    expect(said.join()).toContain(`the database lies in ${place}`);
    expect(await query(postgres.url, 'select 1 as n')).toEqual([{ n: 1 }]);

    // Opened later, the project keeps the database that it has.
    await stop(postgres);
    await chmod(home, 0o755);
    await start();
    expect(await placeOf()).toBe(place);
  });
});

const presences = `select count(*)::int as n from pg_stat_activity where application_name = 'vesselry presence'`;
