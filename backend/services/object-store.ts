import {
  DeleteObjectCommand,
  GetObjectCommand,
  HeadBucketCommand,
  HeadObjectCommand,
  NoSuchKey,
  NotFound,
  S3Client,
} from '@aws-sdk/client-s3';
import { Upload } from '@aws-sdk/lib-storage';
import { createHash, randomUUID } from 'node:crypto';
import { Readable } from 'node:stream';
import type { ObjectStoreSettings } from '../config/setting-groups.ts';

interface StoredObject {
  key: string;
  /** Hex SHA-256 of the bytes that went in. */
  sha256: string;
  /** Bytes. */
  size: number;
}

/** Where source documents, cuts and exports lie; keys are random and say nothing. */
export interface ObjectStore {
  /** Streams the bytes in under a new random key; past `limit` bytes throws ObjectTooLarge and leaves nothing. */
  put(
    body: AsyncIterable<Uint8Array>,
    options: { limit: number; contentType?: string },
  ): Promise<StoredObject>;
  /** @throws ObjectMissing */
  get(key: string): Promise<Readable>;
  /** The bytes from `first` to `last`, both included. @throws ObjectMissing */
  getRange(key: string, first: number, last: number): Promise<Readable>;
  /** Size in bytes, or null when there is no such object. */
  head(key: string): Promise<{ size: number } | null>;
  exists(key: string): Promise<boolean>;
  /** Removing what is not there is no error. */
  delete(key: string): Promise<void>;
  /** Throws when the bucket does not answer; for the health page and the start. */
  check(): Promise<void>;
  close(): void;
}

export class ObjectTooLarge extends Error {
  override name = 'ObjectTooLarge';
  readonly limit: number;

  constructor(limit: number) {
    super(`The object is larger than ${limit} bytes.`);
    this.limit = limit;
  }
}

export class ObjectMissing extends Error {
  override name = 'ObjectMissing';
}

// The SDK is pinned to a version that serves Node 20; its advice on later ones is not for the person who starts.
process.env['AWS_SDK_JS_NODE_VERSION_SUPPORT_WARNING_DISABLED'] ??= 'true';

/** Opens the bucket of an S3-compatible store. */
export function openObjectStore(settings: ObjectStoreSettings): ObjectStore {
  const { bucket: Bucket, endpoint, region, accessKeyId, secretAccessKey } = settings;
  const client = new S3Client({
    ...(endpoint ? { endpoint, forcePathStyle: true } : {}),
    region,
    credentials: { accessKeyId, secretAccessKey },
    // The default adds checksums as trailers that other stores may refuse; our own SHA-256 is kept in the row.
    requestChecksumCalculation: 'WHEN_REQUIRED',
    responseChecksumValidation: 'WHEN_REQUIRED',
  });

  async function read(Key: string, Range?: string): Promise<Readable> {
    const answer = await client.send(new GetObjectCommand({ Bucket, Key, Range })).catch(missing(Key));
    if (answer.Body instanceof Readable) return answer.Body;
    throw new Error('The object store answered without a body.');
  }

  async function head(Key: string): Promise<{ size: number } | null> {
    try {
      const answer = await client.send(new HeadObjectCommand({ Bucket, Key }));
      return { size: answer.ContentLength ?? 0 };
    } catch (error) {
      if (error instanceof NotFound) return null;
      throw error;
    }
  }

  return {
    put: async (body, { limit, contentType: ContentType }) => {
      const key = randomUUID();
      const seen = { hash: createHash('sha256'), size: 0 };
      const Body = Readable.from(measured(body, seen, limit), { objectMode: false });
      // An Upload that fails aborts its parts by itself.
      await new Upload({ client, params: { Bucket, Key: key, Body, ContentType } }).done();
      return { key, sha256: seen.hash.digest('hex'), size: seen.size };
    },
    get: (key) => read(key),
    getRange: (key, first, last) => read(key, `bytes=${first}-${last}`),
    head,
    exists: async (key) => (await head(key)) !== null,
    delete: async (Key) => {
      await client.send(new DeleteObjectCommand({ Bucket, Key }));
    },
    check: async () => {
      await client.send(new HeadBucketCommand({ Bucket }));
    },
    close: () => client.destroy(),
  };
}

async function* measured(
  body: AsyncIterable<Uint8Array>,
  seen: { hash: ReturnType<typeof createHash>; size: number },
  limit: number,
): AsyncGenerator<Uint8Array> {
  for await (const chunk of body) {
    seen.size += chunk.length;
    if (seen.size > limit) throw new ObjectTooLarge(limit);
    seen.hash.update(chunk);
    yield chunk;
  }
}

function missing(key: string): (error: unknown) => never {
  return (error) => {
    throw error instanceof NoSuchKey ? new ObjectMissing(`No object ${key}.`, { cause: error }) : error;
  };
}
