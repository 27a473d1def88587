import { readdirSync } from 'node:fs';
import { fileURLToPath } from 'node:url';

/** The project's folder, without a slash at the end. */
export const root = fileURLToPath(new URL('../..', import.meta.url)).replace(/\/$/, '');

/** Files below these folders whose path matches, relative to the project, sorted. */
export const filesBelow = (folders: readonly string[], pattern: RegExp): string[] =>
  folders
    .flatMap((folder) =>
      readdirSync(`${root}/${folder}`, { recursive: true, encoding: 'utf8' }).map(
        (file) => `${folder}/${file.replaceAll('\\', '/')}`,
      ),
    )
    .filter((file) => pattern.test(file) && !file.includes('node_modules'))
    .sort();
