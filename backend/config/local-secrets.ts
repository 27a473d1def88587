import { randomBytes } from 'node:crypto';
import { mkdirSync, readFileSync, renameSync, writeFileSync } from 'node:fs';
import { join, resolve } from 'node:path';
import { StartError } from './start-error.ts';

/** Where the services of our own keep their data; `.data` in the project unless DATA_FOLDER says otherwise. */
export function dataFolderOf(environment: Readonly<Record<string, string | undefined>>): string {
  return resolve(environment['DATA_FOLDER'] || join(import.meta.dirname, '../../.data'));
}

/** Gives a secret of 32 random bytes, base64url, the same one at every start. */
export type LocalSecrets = (name: string) => string;

/**
 * Secrets of an installation that was given none, kept readable by their owner alone.
 * Made on first use, so that a production start, which asks for none, leaves none.
 */
export function localSecrets(dataFolder: string): LocalSecrets {
  const file = join(dataFolder, 'secrets.json');
  return (name) => {
    const kept = readKept(file);
    const known = kept[name];
    if (known) return known;
    const made = randomBytes(32).toString('base64url');
    mkdirSync(dataFolder, { recursive: true });
    const draft = `${file}.${process.pid}`;
    writeFileSync(draft, `${JSON.stringify({ ...kept, [name]: made }, null, 2)}\n`, { mode: 0o600 });
    renameSync(draft, file);
    return made;
  };
}

function readKept(file: string): Record<string, string> {
  try {
    return JSON.parse(readFileSync(file, 'utf8')) as Record<string, string>;
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === 'ENOENT') return {};
    throw new StartError(
      `${file} cannot be read: it holds the passwords of the database in .data. ` +
        'Start as the account that made it, or put it back from a copy.',
      { cause: error },
    );
  }
}
