import { createHash, randomUUID } from 'node:crypto';
import { createReadStream, createWriteStream, existsSync } from 'node:fs';
import { mkdir, readdir, rename, rm, stat } from 'node:fs/promises';
import type { IncomingMessage } from 'node:http';
import { join } from 'node:path';
import { pipeline } from 'node:stream/promises';

/** An S3 error code with its status. */
export class Refusal extends Error {
  readonly status: number;
  readonly code: string;

  constructor(status: number, code: string) {
    super(code);
    this.status = status;
    this.code = code;
  }
}

/** Writes the body beside its place and renames it, so that a broken upload never looks like an object. */
export async function receive(request: IncomingMessage, file: string): Promise<string> {
  if (request.headers['content-encoding']?.includes('aws-chunked')) throw new Refusal(501, 'NotImplemented');
  const draft = `${file}.${randomUUID()}`;
  const hash = createHash('md5');
  try {
    await pipeline(
      request,
      async function* (chunks: AsyncIterable<Buffer>) {
        for await (const chunk of chunks) {
          hash.update(chunk);
          yield chunk;
        }
      },
      createWriteStream(draft, { mode: 0o600 }),
    );
    await rename(draft, file);
  } catch (error) {
    await rm(draft, { force: true });
    throw error;
  }
  return `"${hash.digest('hex')}"`;
}

const uploadsOf = (folder: string) => join(folder, 'uploads');

/** Parts of an upload that was broken off by a crash; a day is longer than any upload takes. */
export async function removeForgottenUploads(folder: string): Promise<void> {
  await mkdir(uploadsOf(folder), { recursive: true });
  for (const id of await readdir(uploadsOf(folder))) {
    const upload = join(uploadsOf(folder), id);
    const age = Date.now() - (await stat(upload)).mtimeMs;
    if (age > 24 * 3600 * 1000) await rm(upload, { recursive: true, force: true });
  }
}

/** Opens an upload in parts and gives its id. */
export async function beginUpload(folder: string): Promise<string> {
  const id = randomUUID();
  await mkdir(join(uploadsOf(folder), id), { recursive: true });
  return id;
}

/** Folder of an upload under way. @throws Refusal when there is none */
export function openUpload(folder: string, id: string): string {
  const upload = join(uploadsOf(folder), id);
  if (!/^[0-9a-f-]{36}$/.test(id) || !existsSync(upload)) throw new Refusal(404, 'NoSuchUpload');
  return upload;
}

/** File of the part that the query names. */
export function partFile(upload: string, query: URLSearchParams): string {
  const number = Number(query.get('partNumber'));
  if (!Number.isInteger(number) || number < 1 || number > 10_000) throw new Refusal(400, 'InvalidArgument');
  return join(upload, String(number).padStart(5, '0'));
}

/** Puts the parts together in their order, whatever order they came in. */
export async function joinParts(upload: string, object: string): Promise<string> {
  const whole = join(upload, 'whole');
  await rm(whole, { force: true }); // of a try that broke off
  for (const part of (await readdir(upload)).filter((name) => /^\d{5}$/.test(name)).sort()) {
    await pipeline(
      createReadStream(join(upload, part)),
      createWriteStream(whole, { flags: 'a', mode: 0o600 }),
    );
  }
  await rename(whole, object);
  await rm(upload, { recursive: true, force: true });
  return `"${randomUUID()}"`;
}

/** What the file system knows of an object. @throws Refusal when there is none */
export async function found(object: string) {
  return stat(object).catch(() => {
    throw new Refusal(404, 'NoSuchKey');
  });
}
