import { execFile, spawnSync } from 'node:child_process';
import { readFileSync } from 'node:fs';
import { StartError } from '../../config/start-error.ts';

/** Who runs the database's programs; `ids` is null when that is simply us. */
export interface Account {
  ids: { uid: number; gid: number } | null;
  home: string;
}

export interface Outcome {
  code: number;
  output: string;
}

/** PostgreSQL refuses to run as root, so a root start hands its programs to the account `postgres`. */
export function databaseAccount(): Account {
  if (process.getuid?.() !== 0) return { ids: null, home: process.env.HOME ?? '/' };
  const line = readFileSync('/etc/passwd', 'utf8')
    .split('\n')
    .find((entry) => entry.startsWith('postgres:'));
  const [, , uid, gid, , home] = line?.split(':') ?? [];
  if (uid === undefined || gid === undefined || !home) {
    throw new StartError(
      'Started as root, and there is no account "postgres" to run the database under. ' +
        'Start as an ordinary user, or install the Debian package postgresql.',
    );
  }
  return { ids: { uid: Number(uid), gid: Number(gid) }, home };
}

/** Whether the account can enter a folder; a clone below root's closed home is out of its reach. */
export function canReach(account: Account, folder: string): boolean {
  return spawnSync('test', ['-x', folder], { cwd: '/', ...account.ids }).status === 0;
}

/** Runs a program as the account, in an environment that no PG… variable of the caller reaches. */
export function runAs(account: Account, program: string, args: string[]): Promise<Outcome> {
  const env = { PATH: process.env.PATH, LC_ALL: 'C' };
  return new Promise((resolve) => {
    execFile(program, args, { cwd: '/', env, ...account.ids }, (error, stdout, stderr) => {
      const code = error ? (typeof error.code === 'number' ? error.code : 1) : 0;
      resolve({ code, output: `${stdout}${stderr}`.trim() || (error?.message ?? '') });
    });
  });
}
