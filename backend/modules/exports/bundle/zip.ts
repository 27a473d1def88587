import { ZipArchive } from 'archiver';
import type { BundleFile } from './files.ts';

/** The same files give the same bytes: one order, one date that says nothing, no owner. */
const plain = { date: new Date('1980-01-01T00:00:00Z'), mode: 0o644 };

/** Packs files into a ZIP as it is read. */
export function zipped(files: readonly BundleFile[]): AsyncIterable<Uint8Array> {
  // The types do not know forceUTC: without it the bytes would depend on the machine's zone.
  const options = { zlib: { level: 6 }, forceUTC: true };
  const archive = new ZipArchive(options);
  for (const { name, text } of files) archive.append(text, { name, ...plain });
  // A failure reaches the reader as the stream's error.
  archive.finalize().catch((error: unknown) => archive.destroy(error as Error));
  return archive;
}
