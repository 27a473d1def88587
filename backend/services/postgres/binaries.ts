import { spawnSync } from 'node:child_process';
import { existsSync, readdirSync, realpathSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { findExecutable, installDebianPackage, isExecutable } from '../../../scripts/lib/debian.mjs';
import { StartError, type Say } from '../../config/start-error.ts';

/** Debian keeps one folder a major version here and leaves initdb off the PATH. */
const debianFolder = '/usr/lib/postgresql';
const programs = ['initdb', 'pg_ctl', 'postgres'];

/**
 * Folder with PostgreSQL's programs: on PATH, else Debian's newest; installed from Debian when there is none.
 * An existing cluster asks for its own major version, which alone can read it.
 */
export function postgresPrograms(say: Say, major?: string): string {
  const found = findPrograms(major);
  if (found) return found;
  if (major && findPrograms()) {
    throw new StartError(
      `The database in .data was made by PostgreSQL ${major}, which is not installed here. ` +
        `Install the package postgresql-${major}, or set DATABASE_URL and DATABASE_OWNER_URL.`,
    );
  }
  say('PostgreSQL is not here: installing the Debian package postgresql');
  const installed = installDebianPackage('postgresql') ? findPrograms(major) : null;
  if (installed) return installed;
  throw new StartError(
    'PostgreSQL is not installed, and this account may not install it. Two ways out: ' +
      'install it (as root: apt-get install postgresql), or set DATABASE_URL and DATABASE_OWNER_URL.',
  );
}

function findPrograms(major?: string): string | null {
  return candidates().find((folder) => isComplete(folder) && (!major || majorOf(folder) === major)) ?? null;
}

function candidates(): string[] {
  const onPath = findExecutable('initdb');
  const versions = existsSync(debianFolder) ? readdirSync(debianFolder) : [];
  return [
    ...(onPath ? [dirname(realpathSync(onPath))] : []),
    ...versions.sort((a, b) => Number(b) - Number(a)).map((version) => join(debianFolder, version, 'bin')),
  ];
}

const isComplete = (folder: string) => programs.every((program) => isExecutable(join(folder, program)));

function majorOf(folder: string): string | undefined {
  const answer = spawnSync(join(folder, 'postgres'), ['--version'], { encoding: 'utf8' }).stdout;
  return /(\d+)/.exec(answer)?.[1];
}
