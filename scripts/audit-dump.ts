/**
 * npm run audit:dump -- --out FOLDER
 *
 * Writes the trail as an outsider checks it: chain.jsonl (events and revisions: commitments only), values.jsonl
 * (the values and their salts: as sensitive as the study) and heads.jsonl (the newest event of each chain; print it
 * and keep it elsewhere). Reads DATABASE_OWNER_URL, or DATABASE_URL alone, or the database of our own.
 */
import { createWriteStream } from 'node:fs';
import { mkdir } from 'node:fs/promises';
import { join } from 'node:path';
import { Readable } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import { parseArgs } from 'node:util';
import { StartError } from '#backend/config/start-error.ts';
import { dumpLines } from '#backend/database/trail/dump-chain.ts';
import { command, withDatabase } from './lib/with-database.ts';

const { values: given } = parseArgs({ options: { out: { type: 'string' } } });

async function dump(url: string, folder: string): Promise<void> {
  await mkdir(folder, { recursive: true, mode: 0o700 });
  for (const what of ['chain', 'values', 'heads'] as const) {
    const file = join(folder, `${what}.jsonl`);
    await pipeline(Readable.from(dumpLines(url, what)), createWriteStream(file, { mode: 0o600 }));
    console.log(file);
  }
}

await command(async () => {
  const folder = given.out;
  if (folder === undefined) throw new StartError('Say where to: --out FOLDER');
  const { DATABASE_OWNER_URL: ownerUrl, DATABASE_URL: url } = process.env;
  const address = ownerUrl ?? url;
  if (address !== undefined) await dump(address, folder);
  else await withDatabase((database) => dump(database.ownerUrl, folder));
});
