import { inflateRawSync } from 'node:zlib';

/** The files of a ZIP in memory, by name, read from its central directory; enough for archives we made. */
export function unzipped(zip: Buffer): Map<string, string> {
  const files = new Map<string, string>();
  const end = zip.lastIndexOf(Buffer.from([0x50, 0x4b, 0x05, 0x06]));
  let at = zip.readUInt32LE(end + 16);
  for (let left = zip.readUInt16LE(end + 10); left > 0; left -= 1) {
    const method = zip.readUInt16LE(at + 10);
    const size = zip.readUInt32LE(at + 20);
    const [nameLength, extraLength, commentLength] = [28, 30, 32].map((offset) =>
      zip.readUInt16LE(at + offset),
    ) as [number, number, number];
    const local = zip.readUInt32LE(at + 42);
    const name = zip.subarray(at + 46, at + 46 + nameLength).toString('utf8');
    const start = local + 30 + zip.readUInt16LE(local + 26) + zip.readUInt16LE(local + 28);
    const bytes = zip.subarray(start, start + size);
    files.set(name, (method === 8 ? inflateRawSync(bytes) : bytes).toString('utf8'));
    at += 46 + nameLength + extraLength + commentLength;
  }
  return files;
}
