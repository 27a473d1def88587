/**
 * npm run allocation:verify -- FILE [--commitment DIGEST]
 *
 * Checks an opened allocation list; needs no server and no database. FILE is the answer of
 * `/studies/…/allocation/opened`; DIGEST is the one written down when the list was sealed, without which the digest in
 * FILE is taken. Exit code 0 when all fits, 1 when not, 2 for bad input.
 */
import { readFile } from 'node:fs/promises';
import { parseArgs } from 'node:util';
import { verifyAllocation, type OpenedAllocation } from '#schemas/participants/verify-allocation.ts';

async function main(): Promise<number> {
  const { values, positionals } = parseArgs({
    options: { commitment: { type: 'string' } },
    allowPositionals: true,
  });
  const [file] = positionals;
  if (file === undefined) throw new Error('Say which file holds the opened list.');
  const opened = JSON.parse(await readFile(file, 'utf8')) as OpenedAllocation;
  const commitment = values.commitment ?? opened.commitment;
  const { sealHolds, madeFromSeed } = await verifyAllocation({ ...opened, commitment });
  console.log(
    sealHolds
      ? `The list is the one that was sealed: ${opened.list.length} places, digest ${commitment}.`
      : `BROKEN  List and salt do not give the digest ${commitment}.`,
  );
  console.log(
    madeFromSeed
      ? 'The seed makes exactly this list: no place was chosen.'
      : 'BROKEN  The seed makes another list.',
  );
  return sealHolds && madeFromSeed ? 0 : 1;
}

main().then(
  (code) => (process.exitCode = code),
  (error: unknown) => {
    console.error(error instanceof Error ? error.message : String(error));
    process.exitCode = 2;
  },
);
