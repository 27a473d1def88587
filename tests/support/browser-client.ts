import { spawnSync } from 'node:child_process';
import { existsSync, readdirSync, statSync } from 'node:fs';
import { join } from 'node:path';

const root = join(import.meta.dirname, '../..');

/** Builds the client that the server serves, where there is none or a source is newer. */
export function buildClient(): void {
  const built = join(root, 'dist/client/index.html');
  const madeAt = existsSync(built) ? statSync(built).mtimeMs : 0;
  const sources = ['frontend', 'schemas', 'analysis'].flatMap((folder) => filesBelow(join(root, folder)));
  if (sources.every((file) => statSync(file).mtimeMs < madeAt)) return;
  const vite = join(root, 'node_modules/vite/bin/vite.js');
  const { status, stderr } = spawnSync(process.execPath, [vite, 'build', '--logLevel', 'warn'], {
    cwd: root,
    encoding: 'utf8',
  });
  if (status !== 0) throw new Error(`The client could not be built:\n${stderr}`);
}

const filesBelow = (folder: string): string[] =>
  readdirSync(folder, { recursive: true, withFileTypes: true })
    .filter((entry) => entry.isFile() && !entry.name.includes('.test.'))
    .map((entry) => join(entry.parentPath, entry.name));
