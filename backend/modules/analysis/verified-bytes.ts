import { createHash } from 'node:crypto';

/** Passes bytes on and refuses at the end when they are not those that were stored. */
export async function* verifiedBytes(
  bytes: AsyncIterable<Uint8Array>,
  expected: string,
): AsyncGenerator<Uint8Array> {
  const hash = createHash('sha256');
  for await (const chunk of bytes) {
    hash.update(chunk);
    yield chunk;
  }
  if (hash.digest('hex') !== expected) throw new Error('A stored file no longer matches its hash.');
}
