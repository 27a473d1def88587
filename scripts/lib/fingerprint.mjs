import { createHash } from 'node:crypto';
import { existsSync, readdirSync, readFileSync, statSync } from 'node:fs';
import { join } from 'node:path';

/** Hash over the names and bytes of files and folders below `root`, and over further texts. */
export function fingerprint(root, paths, ...texts) {
  const hash = createHash('sha256');
  for (const text of texts) hash.update(`${text}\0`);
  for (const path of paths.flatMap((name) => filesBelow(root, name))) {
    hash
      .update(`${path}\0`)
      .update(readFileSync(join(root, path)))
      .update('\0');
  }
  return hash.digest('hex');
}

/** Whether a mark file holds this fingerprint. */
export const isMarked = (file, mark) => existsSync(file) && readFileSync(file, 'utf8').trim() === mark;

function filesBelow(root, path) {
  const full = join(root, path);
  if (!existsSync(full)) return [];
  if (statSync(full).isFile()) return [path];
  const names = readdirSync(full).sort();
  return names.flatMap((name) => filesBelow(root, `${path}/${name}`));
}
