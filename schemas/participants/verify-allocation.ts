/** What is opened after unblinding: all that the list was made from, and the digest that was public from the first day. */
export interface OpenedAllocation {
  commitment: string;
  /** 32 random bytes each, hex. */
  seed: string;
  salt: string;
  strata: readonly { key: string; slots: number }[];
  sequences: readonly string[];
  blockSizes: readonly number[];
  list: readonly { stratum: string; position: number; sequence: string }[];
}

export interface AllocationVerdict {
  /** The list and the salt give the digest that was published before the first participant. */
  sealHolds: boolean;
  /** The list is what the seed makes: nobody chose it. */
  madeFromSeed: boolean;
}

/**
 * Checks an opened list without trusting whoever opened it; runs in a browser or in Node, and is written apart from
 * the code that makes lists, whose description it follows (`backend/modules/participants/allocation-list.ts`).
 */
export async function verifyAllocation(opened: OpenedAllocation): Promise<AllocationVerdict> {
  const text = JSON.stringify(
    opened.list.map(({ position, sequence, stratum }) => ({ position, sequence, stratum })),
  );
  const salted = new Uint8Array([...bytesOf(opened.salt), ...new TextEncoder().encode(text)]);
  const digest = hexOf(await crypto.subtle.digest('SHA-256', salted));
  const made: string[] = [];
  for (const { key, slots } of opened.strata) made.push(...(await sequencesOf(opened, key, slots)));
  const places = opened.strata.flatMap(({ key, slots }) =>
    Array.from({ length: slots }, (_, at) => `${key} ${at + 1}`),
  );
  return {
    sealHolds: digest === opened.commitment,
    madeFromSeed:
      opened.list.length === made.length &&
      opened.list.every(
        (slot, at) => slot.sequence === made[at] && `${slot.stratum} ${slot.position}` === places[at],
      ),
  };
}

async function sequencesOf(opened: OpenedAllocation, stratum: string, slots: number): Promise<string[]> {
  const key = await crypto.subtle.importKey(
    'raw',
    new Uint8Array(bytesOf(opened.seed)),
    { name: 'HMAC', hash: 'SHA-256' },
    false,
    ['sign'],
  );
  const words: number[] = [];
  let digests = 0;
  async function word(): Promise<number> {
    if (words.length === 0) {
      const message = new TextEncoder().encode(`${stratum}/${digests++}`);
      const view = new DataView(await crypto.subtle.sign('HMAC', key, message));
      for (let at = 0; at < 32; at += 4) words.push(view.getUint32(at));
    }
    return words.shift()!;
  }
  async function below(n: number): Promise<number> {
    let drawn = await word();
    while (drawn >= 2 ** 32 - (2 ** 32 % n)) drawn = await word();
    return drawn % n;
  }
  const sequences: string[] = [];
  while (sequences.length < slots) {
    const size = opened.blockSizes[await below(opened.blockSizes.length)] ?? 0;
    if (size < 1) return []; // no making of ours, and it would never end
    const block = Array.from(
      { length: size },
      (_, at) => opened.sequences[at % opened.sequences.length] ?? '',
    );
    for (let last = size - 1; last > 0; last -= 1) {
      const other = await below(last + 1);
      const moved = block[last]!;
      block[last] = block[other]!;
      block[other] = moved;
    }
    sequences.push(...block);
  }
  return sequences.slice(0, slots);
}

const bytesOf = (hex: string): number[] => (hex.match(/../g) ?? []).map((pair) => Number.parseInt(pair, 16));

const hexOf = (bytes: ArrayBuffer): string =>
  [...new Uint8Array(bytes)].map((byte) => byte.toString(16).padStart(2, '0')).join('');
