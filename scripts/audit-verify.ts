/**
 * npm run audit:verify -- --dump FILE [--heads FILE] [--values FILE]
 *
 * Follows the trail's chains in a dump; needs no server and no database. `--heads` are those printed earlier
 * (receipts, manifests, mails), one JSON object a line: what was cut off or made anew is found only against them.
 * `--values` checks the values against the commitments too. Exit code 0 when all fits, 1 when not, 2 for bad input.
 */
import { createReadStream } from 'node:fs';
import { createInterface } from 'node:readline';
import { parseArgs } from 'node:util';
import {
  ChainVerifier,
  type DumpedEvent,
  type DumpedRevision,
  type DumpedValue,
  type Head,
} from '#backend/database/trail/verify-chain.ts';

type Line = { event: DumpedEvent } | { revision: DumpedRevision } | { value: DumpedValue } | { head: Head };

async function* linesOf(file: string): AsyncGenerator<Line> {
  let number = 0;
  for await (const text of createInterface({ input: createReadStream(file), crlfDelay: Infinity })) {
    number += 1;
    if (text.trim() === '') continue;
    try {
      yield JSON.parse(text) as Line;
    } catch {
      throw new Error(`${file}, line ${number}: is not JSON; the file was damaged or cut.`);
    }
  }
}

async function main(): Promise<number> {
  const { values: given } = parseArgs({
    options: { dump: { type: 'string' }, heads: { type: 'string' }, values: { type: 'string' } },
  });
  if (given.dump === undefined) throw new Error('Say which dump: --dump FILE');
  const heads: Head[] = [];
  if (given.heads !== undefined) {
    for await (const line of linesOf(given.heads)) if ('head' in line) heads.push(line.head);
  }
  const verifier = new ChainVerifier(heads);
  for await (const line of linesOf(given.dump)) {
    if ('event' in line) verifier.event(line.event);
    else if ('revision' in line) verifier.revision(line.revision);
  }
  if (given.values !== undefined) {
    for await (const line of linesOf(given.values)) if ('value' in line) verifier.value(line.value);
  }
  const findings = verifier.finish();
  for (const { study, sequence, message } of findings) {
    console.log(`BROKEN  study ${study}, event ${sequence ?? '?'}: ${message}`);
  }
  for (const { study, sequence, address } of verifier.redactions) {
    console.log(`redacted  study ${study}, event ${sequence}: ${address}`);
  }
  for (const head of verifier.heads.values()) console.log(JSON.stringify({ head }));
  const against =
    given.heads === undefined
      ? 'no printed heads given: a cut-off end cannot be seen'
      : `${heads.length} printed heads met`;
  console.log(
    `${findings.length === 0 ? 'OK' : 'BROKEN'}: ${verifier.events} events, ${verifier.values} values, ${verifier.redactions.length} redacted; ${against}`,
  );
  return findings.length === 0 ? 0 : 1;
}

main().then(
  (code) => {
    process.exitCode = code;
  },
  (error: unknown) => {
    console.error(error instanceof Error ? error.message : String(error));
    process.exitCode = 2;
  },
);
