import { spawnSync } from 'node:child_process';
import { accessSync, constants, statSync } from 'node:fs';
import { delimiter, join } from 'node:path';

/** Path of an executable on PATH, or null. */
export function findExecutable(name, path = process.env.PATH ?? '') {
  return (
    path
      .split(delimiter)
      .filter(Boolean)
      .map((folder) => join(folder, name))
      .find(isExecutable) ?? null
  );
}

/**
 * Installs a Debian package, its output shown. Needs root, or a sudo that asks no password.
 * Answers false where neither is at hand or apt-get fails; the caller names the ways out.
 */
export function installDebianPackage(name) {
  const prefix = privilege();
  if (!prefix || !findExecutable('apt-get')) return false;
  return aptGet(prefix, 'update') && aptGet(prefix, 'install', '-y', '--no-install-recommends', name);
}

/** Whether the path is a file that this process may run. */
export function isExecutable(path) {
  try {
    accessSync(path, constants.X_OK);
    return statSync(path).isFile();
  } catch {
    return false;
  }
}

function privilege() {
  if (process.getuid?.() === 0) return [];
  const asksNothing = spawnSync('sudo', ['-n', 'true'], { stdio: 'ignore' }).status === 0;
  return asksNothing ? ['sudo', '-n'] : null;
}

function aptGet(prefix, ...args) {
  // The variable travels through env(1), because sudo drops the caller's environment.
  const [command, ...rest] = [...prefix, 'env', 'DEBIAN_FRONTEND=noninteractive', 'apt-get', ...args];
  return spawnSync(command, rest, { stdio: ['ignore', 'inherit', 'inherit'] }).status === 0;
}
