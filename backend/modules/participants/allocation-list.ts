import { createHash, createHmac } from 'node:crypto';
import { canonicalForm } from '#backend/database/trail/canonical.ts';

/** What a list is made from: with it anyone can make the same list again (RB-01, RB-12). */
export interface ListMaking {
  /** 32 random bytes, hex. */
  seed: string;
  /** A site's letters, or one stratum for all of them. */
  strata: readonly { key: string; slots: number }[];
  /** Keys of the protocol's sequences. */
  sequences: readonly string[];
  /** Each a multiple of the number of sequences. */
  blockSizes: readonly number[];
}

export interface ListSlot {
  stratum: string;
  /** 1 for the first of its stratum. */
  position: number;
  sequence: string;
}

/**
 * Permuted blocks, stratified: within each block every sequence comes equally often, in random order, and the
 * size of each block is drawn anew, so that the end of a block cannot be foreseen.
 *
 * Random numbers  for a stratum, 32-bit words (big-endian, eight a digest, in order) of
 *                 HMAC-SHA-256(key = seed, `stratum/0`), then `stratum/1`, …
 * Below n         the next word w with w < ⌊2³²/n⌋·n, modulo n: no residue is favoured
 * Block           its size: `blockSizes[below(length)]`; filled with the sequences in turn; then shuffled from the
 *                 end (Fisher and Yates): for i from size−1 to 1 exchange i with below(i+1)
 * End             the last block is cut where the stratum has its slots, so their number tells nothing of blocks
 *
 * @throws RangeError for a making that cannot give balanced blocks
 */
export function makeAllocationList(making: ListMaking): ListSlot[] {
  assertPossible(making);
  return making.strata.flatMap(({ key, slots }) => {
    const below = randomBelow(Buffer.from(making.seed, 'hex'), key);
    const drawn: string[] = [];
    while (drawn.length < slots) drawn.push(...block(making, below));
    return drawn.slice(0, slots).map((sequence, at) => ({ stratum: key, position: at + 1, sequence }));
  });
}

/** SHA-256(salt ‖ RFC 8785 form of the list), hex: public on the day of sealing, opened after unblinding. */
export const listCommitment = (salt: string, list: readonly ListSlot[]): string =>
  createHash('sha256').update(Buffer.from(salt, 'hex')).update(canonicalForm(list)).digest('hex');

function block({ sequences, blockSizes }: ListMaking, below: (n: number) => number): string[] {
  const size = blockSizes[below(blockSizes.length)]!;
  const drawn = Array.from({ length: size }, (_, at) => sequences[at % sequences.length]!);
  for (let i = size - 1; i >= 1; i -= 1) {
    const j = below(i + 1);
    [drawn[i], drawn[j]] = [drawn[j]!, drawn[i]!];
  }
  return drawn;
}

function randomBelow(seed: Buffer, stratum: string): (n: number) => number {
  let counter = 0;
  let words: number[] = [];
  const nextWord = (): number => {
    if (words.length === 0) {
      const digest = createHmac('sha256', seed).update(`${stratum}/${counter}`).digest();
      words = Array.from({ length: 8 }, (_, at) => digest.readUInt32BE(4 * at));
      counter += 1;
    }
    return words.shift()!;
  };
  return (n) => {
    const limit = Math.floor(2 ** 32 / n) * n;
    for (let word = nextWord(); ; word = nextWord()) if (word < limit) return word % n;
  };
}

function assertPossible({ seed, strata, sequences, blockSizes }: ListMaking): void {
  if (!/^[0-9a-f]{64}$/.test(seed)) throw new RangeError('A seed has 32 bytes.');
  if (sequences.length < 2)
    throw new RangeError('There is nothing to allocate with fewer than two sequences.');
  if (blockSizes.length === 0 || blockSizes.some((size) => size < 1 || size % sequences.length !== 0)) {
    throw new RangeError('Each block size is a multiple of the number of sequences.');
  }
  if (strata.length === 0 || strata.some(({ slots }) => !Number.isInteger(slots) || slots < 1)) {
    throw new RangeError('Each stratum has at least one slot.');
  }
}
